import type { ChecksPage, ChecksView } from '../../schemas/api/checks-page';
import { Tag, type Tone } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { CellMark } from './CellMark';
import type { Status, StringRow } from './rows';
import { MARK_WORDS, STATUS_WORDS } from './words';
import { matrix } from '../../words/checks';

interface Props {
  checks: ChecksPage['checks'];
  rows: readonly StringRow[];
  view: ChecksView;
  open: string;
  now: string;
  timeZone: string;
  onOpen: (name: string, check?: string) => void;
  onSort: (sort: ChecksView['sort']) => void;
  /** Chosen for signing; null: this person signs nothing. */
  chosen: ReadonlySet<string> | null;
  onChoose: (id: string, chosen: boolean) => void;
}

const TONES: Record<Status, Tone> = {
  signed: 'petrol',
  ready: 'plain',
  blocked: 'rust',
  open: 'plain',
  none: 'outline',
};

/** Strings down, checks across; on a narrow screen the checks of a string are a strip. */
export function Matrix({ checks, rows, view, open, now, timeZone, onOpen, onSort, chosen, onChoose }: Props) {
  const sortable = (key: ChecksView['sort'], label: string) => (
    <button
      type="button"
      onClick={() => onSort(key)}
      className="target inline-flex items-center gap-1 hover:text-ink"
    >
      {label}
      <span aria-hidden="true" className="w-3 text-xs">
        {view.sort === key ? (view.order === 'down' ? '↓' : '↑') : ''}
      </span>
    </button>
  );
  const sorted = (key: ChecksView['sort']) =>
    view.sort === key ? (view.order === 'down' ? 'descending' : 'ascending') : undefined;
  return (
    <div className="overflow-x-auto">
      <table className="w-full border-collapse text-left">
        <caption className="sr-only">{matrix.installChecksByString}</caption>
        <thead>
          <tr className="border-b border-rule align-bottom text-sm text-ink-2">
            {chosen && (
              <th scope="col" className="w-[36px] pb-2 font-medium">
                <span className="sr-only">{matrix.chosenForSigning}</span>
              </th>
            )}
            <th scope="col" aria-sort={sorted('name')} className="pb-1 pr-3 font-medium">
              {sortable('name', matrix.string)}
            </th>
            {checks.map((check) => (
              <th
                key={check.key}
                scope="col"
                className="hidden w-[30px] p-0 text-center align-bottom font-medium lg:table-cell"
              >
                <span className="mx-auto mb-2 mt-4 inline-block rotate-180 whitespace-nowrap [writing-mode:vertical-rl]">
                  {check.name}
                </span>
              </th>
            ))}
            <th scope="col" className="pb-2.5 font-medium lg:hidden">
              {matrix.checks}
            </th>
            <th
              scope="col"
              aria-sort={sorted('recorded')}
              className="hidden pb-1 pl-3 text-right font-medium sm:table-cell"
            >
              {sortable('recorded', matrix.done)}
            </th>
            <th scope="col" aria-sort={sorted('blocks')} className="pb-1 pl-4 font-medium">
              {sortable('blocks', matrix.stands)}
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => {
            const { string, marks, recorded, asked, status } = row;
            const cells = checks.map((check, i) => ({ check, mark: marks[i] ?? 'missing' }));
            const isOpen = string.name === open;
            return (
              <tr
                key={string.id}
                className={`border-b border-rule-faint last:border-b-0 ${isOpen ? 'bg-film' : ''}`}
              >
                {chosen && (
                  <td>
                    {status === 'ready' && (
                      <label className="inline-flex min-h-[44px] min-w-[32px] items-center">
                        <input
                          type="checkbox"
                          className="h-5 w-5 accent-[var(--petrol)]"
                          checked={chosen.has(string.id)}
                          onChange={(event) => onChoose(string.id, event.target.checked)}
                        />
                        <span className="sr-only">{matrix.signWhich(string.name)}</span>
                      </label>
                    )}
                  </td>
                )}
                <th scope="row" className="pr-3 text-left font-semibold">
                  <button
                    type="button"
                    aria-expanded={isOpen}
                    onClick={() => onOpen(string.name)}
                    className="target inline-flex min-h-[44px] items-center hover:underline"
                  >
                    {string.name}
                  </button>
                </th>
                {cells.map((cell) => (
                  <td key={cell.check.key} className="hidden p-0 lg:table-cell">
                    <button
                      type="button"
                      title={`${cell.check.name}: ${MARK_WORDS[cell.mark]}`}
                      aria-label={`${string.name}, ${cell.check.name}: ${MARK_WORDS[cell.mark]}`}
                      onClick={() => onOpen(string.name, cell.check.key)}
                      className="flex h-[40px] w-[30px] items-center justify-center"
                    >
                      <CellMark mark={cell.mark} />
                    </button>
                  </td>
                ))}
                <td className="lg:hidden">
                  <button
                    type="button"
                    onClick={() => onOpen(string.name)}
                    aria-label={matrix.ofChecksRecorded(string.name, recorded, asked)}
                    className="flex min-h-[44px] flex-wrap items-center gap-[2px] py-1"
                  >
                    {cells.map((cell) => (
                      <CellMark key={cell.check.key} mark={cell.mark} size={14} />
                    ))}
                  </button>
                </td>
                <td className="hidden whitespace-nowrap pl-3 text-right sm:table-cell">
                  {recorded} / {asked}
                </td>
                <td className="py-1 pl-4">
                  <div className="flex flex-wrap items-center gap-x-2">
                    <Tag tone={TONES[status]}>{STATUS_WORDS[status]}</Tag>
                    {string.signOff && (
                      <span className="hidden text-sm text-ink-2 xl:inline">
                        {string.signOff.stale ? matrix.signatureNoLongerHolds : string.signOff.person}
                        {!string.signOff.stale && (
                          <>
                            , <SiteTime at={string.signOff.at} now={now} timeZone={timeZone} />
                          </>
                        )}
                      </span>
                    )}
                  </div>
                </td>
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}
