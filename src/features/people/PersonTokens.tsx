import { Button } from '../../components/ui/Button';
import { counted } from '../../drawings/numbers';
import type { PersonItem } from '../../schemas/api/people';

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
      <p>
        {counted(person.tokens, 'token')} in force, by which programs act for {person.name}. Ended ones let
        nobody in from that moment.
      </p>
      <Button className="mt-3" disabled={busy} onClick={onEnd}>
        {person.tokens === 1 ? 'End the token' : `End all ${person.tokens} tokens`}
      </Button>
    </div>
  );
}
