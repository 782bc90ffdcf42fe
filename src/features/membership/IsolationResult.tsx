import { Table, type Column } from '../../components/ui/Table';
import { Tag, type Tone } from '../../components/ui/Tag';
import type { SlotRef } from '../../components/placements/evidence';
import { Button } from '../../components/ui/Button';
import { amperes, percent } from '../../drawings/numbers';
import type { IsolationFindingView, IsolationRun } from '../../schemas/api/isolation';
import { unitName } from '../../components/placements/suspects';
import { isolationResult } from '../../words/membership';

type Unit = IsolationFindingView['units'][number];
type Input = IsolationFindingView['inputs'][number];

const FATES: Record<Unit['fate'], { words: string; tone: Tone; shape: string }> = {
  member_dropped: { words: isolationResult.wentToZero, tone: 'petrol', shape: '▁' },
  member_kept: { words: isolationResult.keptItsCurrent, tone: 'rust', shape: '▮' },
  other_dropped: { words: isolationResult.wentToZeroToo, tone: 'rust', shape: '▁' },
  other_kept: { words: isolationResult.keptItsCurrent, tone: 'plain', shape: '▮' },
  not_told: { words: isolationResult.nothingTold, tone: 'outline', shape: '' },
};
const ORDER: Unit['fate'][] = ['other_dropped', 'member_kept', 'not_told', 'member_dropped', 'other_kept'];

interface Props {
  run: IsolationRun;
  timeZone: string;
  strings: readonly { id: string; name: string }[];
  onReview: ((first: SlotRef, second: SlotRef | null) => void) | null;
}

/** "between 14:02:31 and 14:02:41": reports are apart, so what happened lies between two. */
export function betweenWords(b: { after: string; by: string }, timeZone: string): string {
  return isolationResult.betweenAnd(b.after, timeZone, b.by);
}

/** Unit by unit: the string's own, and whoever of the others fell with it; and what the inputs carried. */
export function IsolationResult({ run, timeZone, strings, onReview }: Props) {
  const { finding } = run;
  const rows = finding.units
    .filter((u) => u.string === run.stringName || u.fate === 'other_dropped')
    .sort((a, b) => ORDER.indexOf(a.fate) - ORDER.indexOf(b.fate) || a.position - b.position);
  const others = finding.units.filter((u) => u.fate === 'other_kept').length;
  const columns: Column<Unit>[] = [
    {
      key: 'unit',
      label: isolationResult.unit,
      cell: (u) => (
        <>
          <span className="font-semibold">{unitName(u)}</span>
          <span className="block whitespace-nowrap text-sm text-ink-2">{u.serial}</span>
        </>
      ),
    },
    { key: 'before', label: isolationResult.before, numeric: true, cell: (u) => amperes(u.before) },
    { key: 'during', label: isolationResult.since, numeric: true, cell: (u) => amperes(u.during) },
    {
      key: 'fell',
      label: isolationResult.fell,
      from: 'sm',
      className: 'text-sm text-ink-2',
      cell: (u) => (u.dropped ? betweenWords(u.dropped, timeZone) : ''),
    },
    {
      key: 'fate',
      label: isolationResult.itsCurrent,
      cell: (u) => (
        <Tag tone={FATES[u.fate].tone} shape={FATES[u.fate].shape}>
          {FATES[u.fate].words}
        </Tag>
      ),
    },
  ];
  const inputs: Column<Input>[] = [
    {
      key: 'name',
      label: isolationResult.input,
      cell: (i) => (
        <>
          <span className="font-medium">{i.name}</span>
          <span className="block text-sm text-ink-2">{i.strings.join(', ')}</span>
        </>
      ),
    },
    { key: 'before', label: isolationResult.before, numeric: true, cell: (i) => amperes(i.before) },
    { key: 'during', label: isolationResult.since, numeric: true, cell: (i) => amperes(i.during) },
    { key: 'lost', label: isolationResult.lostBeyondTheOthers, numeric: true, cell: (i) => percent(i.lost) },
  ];
  const ref = (u: Unit): SlotRef | null => {
    const string = strings.find((s) => s.name === u.string);
    return string ? { stringId: string.id, position: u.position } : null;
  };
  const kept = finding.units.filter((u) => u.fate === 'member_kept');
  const joined = finding.units.filter((u) => u.fate === 'other_dropped');
  const first = kept[0] ?? joined[0];
  const firstRef = first ? ref(first) : null;
  const secondRef = kept.length === 1 && joined.length === 1 && joined[0] ? ref(joined[0]) : null;
  return (
    <div className="grid gap-4">
      {(finding.dropped ?? finding.returned) && (
        <p className="text-sm text-ink-2">
          {finding.dropped && <>{isolationResult.currentFell(betweenWords(finding.dropped, timeZone))}</>}
          {finding.returned && <>{isolationResult.andCameBack(betweenWords(finding.returned, timeZone))}</>}
          {isolationResult.timesAreThoseOf}
        </p>
      )}
      {rows.length > 0 && (
        <Table
          caption={isolationResult.unitsOfAndWhoever(run.stringName)}
          columns={columns}
          rows={rows}
          rowKey={(u) => u.serial}
        />
      )}
      {others > 0 && <p className="text-sm text-ink-2">{isolationResult.unitsOfOtherStrings(others)}</p>}
      {finding.outcome === 'told' && firstRef && onReview && (
        <div>
          <Button onClick={() => onReview(firstRef, secondRef)}>{isolationResult.reviewTheMove}</Button>
        </div>
      )}
      <details>
        <summary className="target inline-flex cursor-pointer items-center text-sm text-petrol">
          {isolationResult.whatTheInputsCarried}
        </summary>
        <Table
          caption={isolationResult.inputs}
          columns={inputs}
          rows={finding.inputs}
          rowKey={(i) => i.name}
        />
      </details>
    </div>
  );
}
