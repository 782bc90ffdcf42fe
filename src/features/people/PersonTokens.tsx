import { Button } from '../../components/ui/Button';
import type { PersonItem } from '../../schemas/api/people';
import { personTokens } from '../../words/people';

/** Programs that act for somebody: a manager sees that there are some, and ends them. */
export function PersonTokens({
  person,
  busy,
  onEnd,
}: {
  person: PersonItem;
  busy: boolean;
  onEnd: () => void;
}) {
  if (person.tokens === 0) return null;
  return (
    <div className="mt-5 border-t border-rule pt-4">
      <p>{personTokens.tokensInForce(person.tokens, person.name)}</p>
      <Button className="mt-3" disabled={busy} onClick={onEnd}>
        {person.tokens === 1 ? personTokens.endTheToken : personTokens.endAllTokens(person.tokens)}
      </Button>
    </div>
  );
}
