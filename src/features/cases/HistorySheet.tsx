import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { type CheckOutcome } from '../../domain/cases/cases';
import { CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import type { CaseEntry } from '../../schemas/api/cases';
import { CommentBox } from './CommentBox';
import type { CaseInHand } from './query';
import { entryWords, OUTCOME_TONE } from './words';
import { historySheet } from '../../words/cases';

/** Everything that happened to a case, oldest first, and the box for the next comment. */
export function HistorySheet({ hand }: { hand: CaseInHand }) {
  const { page } = hand;
  return (
    <Sheet id="history" title={historySheet.history} aside={historySheet.onlyAddedToNever}>
      <ol className="divide-y divide-rule-faint border-y border-rule-faint">
        {page.entries.map((entry) => (
          <Entry key={entry.id} entry={entry} now={page.at} timeZone={page.case.timeZone} />
        ))}
      </ol>
      <CommentBox hand={hand} />
    </Sheet>
  );
}

export function Entry({ entry, now, timeZone }: { entry: CaseEntry; now: string; timeZone: string }) {
  const lines = Array.isArray(entry.detail.lines) ? entry.detail.lines.map(String) : [];
  const outcome =
    entry.kind === 'checked' && typeof entry.detail.outcome === 'string'
      ? (entry.detail.outcome as CheckOutcome)
      : null;
  return (
    <li className="py-2.5">
      <p className="text-sm text-ink-2 [overflow-wrap:anywhere]">
        <strong className="font-semibold text-ink">{entry.person ?? 'Wakeline'}</strong> {entryWords(entry)},{' '}
        <RelativeTime at={entry.at} now={now} timeZone={timeZone} />
        {outcome && (
          <span className="ml-2 inline-block">
            <Tag tone={OUTCOME_TONE[outcome]}>{CHECK_OUTCOME_WORDS[outcome]}</Tag>
          </span>
        )}
      </p>
      {entry.body && (
        <p className="mt-1 max-w-[70ch] whitespace-pre-wrap text-[15px] leading-[22px] [overflow-wrap:anywhere]">
          <Mentions text={entry.body} names={entry.mentions} />
        </p>
      )}
      {lines.length > 0 && <p className="mt-1 text-sm text-ink-2">{lines.join('. ')}.</p>}
    </li>
  );
}

/** A comment with the names in it standing out. */
function Mentions({ text, names }: { text: string; names: readonly string[] }) {
  if (names.length === 0) return text;
  const longest = [...names].sort((a, b) => b.length - a.length);
  const pattern = new RegExp(
    `(@(?:${longest.map((n) => n.replace(/[.*+?^${}()|[\]\\]/g, '\\$&')).join('|')}))`,
    'g',
  );
  return text.split(pattern).map((piece, i) =>
    i % 2 === 1 ? (
      <strong key={i} className="font-semibold text-petrol">
        {piece}
      </strong>
    ) : (
      piece
    ),
  );
}
