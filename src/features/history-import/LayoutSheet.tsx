import { Choice } from '../../components/ui/Choice';
import { Sheet } from '../../components/ui/Sheet';
import {
  isQuantity,
  namesRows,
  PLACE_COLUMNS,
  subjectKey,
  subjectWords,
  type ColumnUse,
  type KnownSubjects,
  type Layout,
  type PlaceColumn,
  type Subject,
} from '../../domain/history-import/layout';
import { PLACE_WORDS } from '../../words/domain-history-import';
import type { HistoryFacts } from './desk';
import { isQuantityName, subjectOptions, columnOptions } from './words';
import { layoutSheet } from '../../words/history-import';

interface Props {
  facts: HistoryFacts;
  layout: Layout;
  known: KnownSubjects;
  siteZone: string;
  timeZones: readonly string[];
  wrong: string | null;
  onLayout: (layout: Layout) => void;
}

const USES = columnOptions(PLACE_COLUMNS.map((value) => ({ value, label: PLACE_WORDS[value] })));
const SHOWN = 3;

const subjectsOf = (known: KnownSubjects): Subject[] => [
  ...known.strings.map((s): Subject => ({ kind: 'string', string: s.name })),
  ...known.inverters.flatMap((v): Subject[] => [
    { kind: 'inverter', inverter: v.name },
    ...v.inputs.map((input): Subject => ({ kind: 'input', inverter: v.name, input })),
  ]),
];

/** What each column means, whose clock the times follow, and how numbers are written. */
export function LayoutSheet({ facts, layout, known, siteZone, timeZones, wrong, onLayout }: Props) {
  const subjects = subjectsOf(known);
  const set = (index: number, use: ColumnUse) =>
    onLayout({ ...layout, columns: layout.columns.map((c, i) => (i === index ? use : c)) });
  const choose = (index: number, value: string) => {
    const [as = '', unit = ''] = value.split(':');
    const before = layout.columns[index];
    if (isQuantityName(as)) set(index, { as, unit, of: before && isQuantity(before) ? before.of : null });
    else if (as === 'nothing') set(index, { as });
    else set(index, { as: as as PlaceColumn });
  };
  const zones = [...new Set([siteZone, 'UTC', ...timeZones])];
  return (
    <Sheet id="columns" title={layoutSheet.columnsClockAndNumbers}>
      <div className="mb-6 grid gap-x-8 gap-y-3 md:grid-cols-3">
        <Choice
          label={layoutSheet.timesFollowTheClock}
          value={layout.timeZone}
          options={zones.map((z) => ({ value: z, label: z === siteZone ? layoutSheet.theSite(z) : z }))}
          onChange={(timeZone) => onLayout({ ...layout, timeZone })}
          hint={layoutSheet.timesWithZone}
        />
        <Choice
          label={layoutSheet.in342026}
          value={layout.dayFirst === null ? '' : layout.dayFirst ? 'day' : 'month'}
          options={[
            { value: '', label: layoutSheet.asTheDatesShow },
            { value: 'day', label: layoutSheet.theDayComesFirst },
            { value: 'month', label: layoutSheet.theMonthComesFirst },
          ]}
          onChange={(v) => onLayout({ ...layout, dayFirst: v === '' ? null : v === 'day' })}
        />
        <Choice
          label={layoutSheet.beforeDecimalsStands}
          value={layout.decimalMark ?? ''}
          options={[
            { value: '', label: layoutSheet.whatTheNumbersShow },
            { value: 'point', label: layoutSheet.decimalPoint },
            { value: 'comma', label: layoutSheet.decimalComma },
          ]}
          onChange={(v) => onLayout({ ...layout, decimalMark: v === 'point' || v === 'comma' ? v : null })}
        />
      </div>
      {wrong && (
        <p role="alert" className="mb-4 font-medium text-rust-ink">
          {wrong}
        </p>
      )}
      <ul className="grid gap-x-8 gap-y-4 md:grid-cols-2 xl:grid-cols-3">
        {facts.headers.map((header, i) => {
          const use = layout.columns[i] ?? { as: 'nothing' };
          const shown = [
            ...new Set(facts.samples.map((row) => (row[i] ?? '').trim()).filter((v) => v !== '')),
          ]
            .slice(0, SHOWN)
            .map((v) => (v.length > 24 ? `${v.slice(0, 23)}…` : v));
          return (
            <li key={`${i} ${header}`} className="min-w-0">
              <Choice
                label={header}
                value={isQuantity(use) ? `${use.as}:${use.unit}` : use.as}
                options={USES}
                onChange={(value) => choose(i, value)}
                hint={shown.length > 0 ? shown.join(' · ') : layoutSheet.emptyInTheFirst}
              />
              {isQuantity(use) && (
                <Choice
                  className="mt-2"
                  inline
                  label={layoutSheet.of}
                  aria-label={layoutSheet.ofWhat(header)}
                  value={use.of ? subjectKey(use.of) : ''}
                  options={subjectOptions(subjects, subjectWords, namesRows(layout))}
                  onChange={(key) =>
                    set(i, { ...use, of: subjects.find((s) => subjectKey(s) === key) ?? null })
                  }
                />
              )}
            </li>
          );
        })}
      </ul>
    </Sheet>
  );
}
