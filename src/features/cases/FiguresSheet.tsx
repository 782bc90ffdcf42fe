import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import type { FiguresString } from '../../domain/cases/figures';
import { CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import { comparedFigures, staircaseOf } from '../../drawings/case-figures';
import { Staircase } from '../../drawings/Staircase';
import { fullTime } from '../../drawings/times';
import type { CasePage } from '../../schemas/api/cases';
import { OUTCOME_TONE } from './words';
import { figuresSheet } from '../../words/cases';

/** So many staircases are drawn; the table names more, the evidence all. */
const DRAWN = 3;

/** The figures of the minute in which the case was opened, and those that were found again after closing. */
export function FiguresSheet({ page }: { page: CasePage }) {
  const { before, after, timeZone, closedAt } = page.case;
  if (!before) return null;
  const lines = comparedFigures(before, after);
  const drawn = before.strings.filter((s) => s.slots.length > 0 && s.at !== null).slice(0, DRAWN);
  return (
    <Sheet
      id="figures"
      title={after ? figuresSheet.beforeAndAfter : figuresSheet.figuresWhenItWas}
      aside={
        after ? (
          <Tag tone={OUTCOME_TONE[after.outcome]}>{CHECK_OUTCOME_WORDS[after.outcome]}</Tag>
        ) : closedAt ? (
          figuresSheet.wakelineLooksAgainOver
        ) : undefined
      }
    >
      <div className="overflow-x-auto">
        <table className="w-full border-collapse text-left">
          <caption className="sr-only">{figuresSheet.figuresBeforeAndAfter}</caption>
          <thead>
            <tr className="border-b border-rule text-sm text-ink-2">
              <th scope="col" className="py-2 pr-4 font-medium">
                {figuresSheet.figure}
              </th>
              <th scope="col" className="py-2 pr-4 font-medium">
                {fullTime(before.at, timeZone)}
              </th>
              {after && (
                <th scope="col" className="py-2 font-medium">
                  {fullTime(after.at, timeZone)}
                </th>
              )}
            </tr>
          </thead>
          <tbody>
            {lines.map((line) => (
              <tr key={`${line.subject} ${line.figure}`} className="border-b border-rule-faint align-top">
                <th scope="row" className="py-2 pr-4 font-normal">
                  <span className="block text-sm text-ink-2">{line.subject}</span>
                  {line.figure}
                </th>
                <td className="py-2 pr-4">{line.before}</td>
                {after && <td className="py-2">{line.after}</td>}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {drawn.map((then) => {
        const now = after?.strings.find((s) => s.id === then.id);
        return (
          <figure key={then.id} className="mt-5">
            <figcaption className="mb-1 text-sm text-ink-2">
              {figuresSheet.stringVoltsAlongIts(then.name, now ? figuresSheet.beforeAndAfter2 : '')}
            </figcaption>
            <div className={now ? 'grid gap-4 xl:grid-cols-2' : ''}>
              <Drawn id={`before-${then.id}`} string={then} half={now !== undefined} />
              {now && <Drawn id={`after-${then.id}`} string={now} half />}
            </div>
          </figure>
        );
      })}
    </Sheet>
  );
}

/** One staircase, drawn for the width that it has: its words stay readable on a phone. */
function Drawn({ id, string, half }: { id: string; string: FiguresString; half: boolean }) {
  const input = staircaseOf(string);
  return (
    <div>
      <Staircase
        id={`${id}-wide`}
        className="hidden sm:block"
        {...input}
        width={half ? 560 : 880}
        height={270}
      />
      <div className="sm:hidden">
        <Staircase id={`${id}-narrow`} {...input} width={340} height={230} />
      </div>
    </div>
  );
}
