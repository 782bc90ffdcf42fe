import type { ChartLine, ChartModel } from '../../components/charts/model';
import type { IsolationCurrents, IsolationRun } from '../../schemas/api/isolation';
import type { MembershipSuspect } from '../../schemas/api/membership';
import { unitName } from '../../components/placements/suspects';
import { membershipChart } from '../../words/membership';

/** A unit's current against its own string's and the other's. */
export function suspectModel(s: MembershipSuspect, timeZone: string): ChartModel {
  const { at, unit, own, other, otherName } = s.series;
  // the unit last: it lies on the line of the string whose current it carries
  const lines: ChartLine[] = [
    { name: membershipChart.itsStringOnThe(s.string), at, values: own, tone: 'slate' },
    ...(otherName ? [{ name: otherName, at, values: other, tone: 'petrol' as const }] : []),
    { name: unitName(s), at, values: unit, tone: 'rust' },
  ];
  return {
    title: membershipChart.currentOf(unitName(s)),
    unit: 'A',
    digits: 2,
    timeZone,
    from: at[0] ?? 0,
    to: at.at(-1) ?? 0,
    lines,
    nights: [],
    marks: [],
  };
}

/** The string that is isolated unit by unit, the others by their medians. */
export function isolationModel(run: IsolationRun, currents: IsolationCurrents, timeZone: string): ChartModel {
  const { at } = currents;
  const strangers = new Set(
    run.finding.units.filter((u) => u.fate === 'other_dropped').map((u) => unitName(u)),
  );
  const seconds = (iso: string): number => new Date(iso).getTime() / 1000;
  const { dropped, returned } = run.finding;
  return {
    title: membershipChart.currentsWhileIsIsolated(run.stringName),
    unit: 'A',
    digits: 2,
    timeZone,
    from: at[0] ?? 0,
    to: at.at(-1) ?? 0,
    lines: [
      ...currents.units.map((u): ChartLine => ({
        name: u.label,
        at,
        values: u.current,
        tone: strangers.has(u.label) ? 'rust' : 'petrol',
      })),
      ...currents.strings
        .filter((s) => s.name !== run.stringName || currents.units.length === 0)
        .map((s): ChartLine => ({ name: s.name, at, values: s.current, tone: 'slate', quiet: true })),
    ],
    nights: [],
    marks: [
      { from: seconds(run.startedAt), to: null, words: membershipChart.theWatchBegan, tone: 'slate' },
      ...(dropped
        ? [
            {
              from: seconds(dropped.after),
              to: returned ? seconds(returned.by) : seconds(dropped.by),
              words: returned
                ? membershipChart.withoutCurrent(run.stringName)
                : membershipChart.stringNameFell(run.stringName),
              tone: 'petrol' as const,
            },
          ]
        : []),
    ],
    fromZero: true,
  };
}
