import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { judgeCheck } from '../../domain/commissioning/checks/judge';
import { checksFor } from '../../domain/commissioning/checks/list';
import { signOffState } from '../../domain/commissioning/checks/sign-off';
import { judgedNow } from '../../domain/commissioning/readings/judged-now';
import { STAGE_WORDS } from '../../words/domain-reading-stages';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { csvResponse } from './csv';

/** Install checks and meter readings of a site as downloads. Times in UTC. */

/** Figures with their names and units; connector types by name. */
function figureWords(
  sheet: Pick<CaptureSnapshot, 'connectors'>,
  check: ReturnType<typeof checksFor>[number],
  record: CaptureString['checks'][number],
): string {
  return check.figures
    .flatMap((f) => {
      const value = record.figures[f.key];
      if (value === undefined) return [];
      if (f.kind === 'number') return [`${f.name} ${value} ${f.unit}`];
      if (f.kind === 'choice')
        return [`${f.name}: ${f.options.find((o) => o.value === value)?.words ?? value}`];
      return [`${f.name}: ${sheet.connectors.find((c) => c.id === value)?.name ?? value}`];
    })
    .join('; ');
}

/** One row a string and check, recorded or not. */
export function checksCsv(sheet: CaptureSnapshot): Response {
  const rows = sheet.strings.flatMap((string) => {
    const context = checkContext(sheet, string.id);
    const state = signOffState(string.checks.map(standingOf), context);
    return checksFor(context).map((check) => {
      const record = string.checks.find((c) => c.check === check.key);
      return {
        string,
        check,
        record,
        state,
        judged: record ? judgeCheck(standingOf(record), context) : null,
      };
    });
  });
  return csvResponse(
    `${sheet.site.name} install checks`,
    [
      { header: 'string', value: (r) => r.string.name },
      { header: 'check', value: (r) => r.check.name },
      { header: 'result', value: (r) => r.record?.result.replace('_', ' ') ?? 'not recorded' },
      { header: 'reason', value: (r) => r.record?.reason },
      { header: 'figures', value: (r) => r.record && figureWords(sheet, r.check, r.record) },
      { header: 'what the figures say', value: (r) => r.judged?.words.join(' ') },
      { header: 'source', value: (r) => (r.judged?.words.length ? r.judged.source : r.check.source) },
      { header: 'note', value: (r) => r.record?.note },
      { header: 'person', value: (r) => r.record?.person },
      { header: 'time (UTC)', value: (r) => r.record && new Date(r.record.at) },
      { header: 'recorded (UTC)', value: (r) => r.record && new Date(r.record.recordedAt) },
      { header: 'string signed by', value: (r) => r.string.signOff?.person },
      { header: 'string signed (UTC)', value: (r) => r.string.signOff && new Date(r.string.signOff.at) },
      { header: 'signature holds', value: (r) => r.string.signOff && !r.string.signOff.stale },
      { header: 'string may be signed', value: (r) => r.state.maySign },
    ],
    rows,
  );
}

/** One row a string, stage and kind of reading; a string without any has one row that says so. */
export function readingsCsv(sheet: CaptureSnapshot): Response {
  interface Row {
    string: CaptureString;
    reading: CaptureString['readings'][number] | null;
    finding: CaptureString['readings'][number]['finding'];
  }
  const rows = sheet.strings.flatMap((string): Row[] =>
    string.readings.length === 0
      ? [{ string, reading: null, finding: null }]
      : string.readings.map((reading) => ({
          string,
          reading,
          // the first of two readings to earth says nothing until the other is there
          finding:
            reading.kind === 'positive_to_negative' ? reading.finding : judgedNow(sheet, string.id, reading),
        })),
  );
  const rounded = (v: number | null | undefined): number | null =>
    v === null || v === undefined ? null : Number(v.toFixed(2));
  return csvResponse(
    `${sheet.site.name} meter readings`,
    [
      { header: 'string', value: (r) => r.string.name },
      { header: 'units', value: (r) => r.string.units },
      { header: 'stage', value: (r) => (r.reading ? STAGE_WORDS[r.reading.stage] : 'not read') },
      { header: 'between', value: (r) => r.reading?.kind.replaceAll('_', ' ') },
      { header: 'voltage (V)', value: (r) => rounded(r.reading?.voltage) },
      { header: 'expected from (V)', value: (r) => rounded(r.finding?.expectedLowV) },
      { header: 'expected to (V)', value: (r) => rounded(r.finding?.expectedHighV) },
      {
        header: 'outcome',
        value: (r) => r.finding?.outcome.replace('_', ' ').replace('cant tell', 'can’t tell'),
      },
      { header: 'what it means', value: (r) => r.finding?.headline },
      { header: 'light', value: (r) => r.reading?.light },
      { header: 'commanded', value: (r) => r.reading?.commanded },
      { header: 'units heard', value: (r) => r.finding?.heard },
      { header: 'strings compared with', value: (r) => r.finding?.siblings.join(', ') },
      { header: 'note', value: (r) => r.reading?.note },
      { header: 'person', value: (r) => r.reading?.person },
      { header: 'time (UTC)', value: (r) => r.reading && new Date(r.reading.at) },
      { header: 'recorded (UTC)', value: (r) => r.reading && new Date(r.reading.recordedAt) },
    ],
    rows,
  );
}
