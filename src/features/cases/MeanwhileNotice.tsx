import { Button } from '../../components/ui/Button';
import { caseFile } from '../../words/cases';
import { Entry } from './HistorySheet';
import type { CaseInHand } from './query';

/** Somebody else was first: what they did, and the choice to send the own change over it. */
export function MeanwhileNotice({ hand }: { hand: CaseInHand }) {
  const { meanwhile, forget, page, send } = hand;
  if (!meanwhile) return null;
  return (
    <div
      role="alert"
      className="mb-5 border-l-0 border-t-2 border-t-rust bg-rust-wash px-[18px] py-4 text-rust-ink"
    >
      <p className="font-medium">{meanwhile.message}</p>
      {meanwhile.since.length > 0 && (
        <ul className="mt-2 bg-sheet px-3 text-ink">
          {meanwhile.since.map((entry) => (
            <Entry key={entry.id} entry={entry} now={page.at} timeZone={page.case.timeZone} />
          ))}
        </ul>
      )}
      <div className="mt-3 flex flex-wrap gap-2">
        <Button weight="primary" disabled={send.isPending} onClick={meanwhile.again}>
          {caseFile.sendMineOverIt}
        </Button>
        <Button onClick={forget}>{caseFile.leaveItAsIt}</Button>
      </div>
    </div>
  );
}
