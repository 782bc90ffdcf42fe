import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { judgeCheck } from '../../domain/commissioning/checks/judge';
import { checksFor } from '../../domain/commissioning/checks/list';
import { signOffState } from '../../domain/commissioning/checks/sign-off';
import { judgedNow } from '../../domain/commissioning/readings/judged-now';
import { STAGE_WORDS } from '../../words/domain-reading-stages';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { csvResponse } from './csv';
import { checkHeads, readingHeads } from '../../words/csv-heads-site';

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
      { header: checkHeads.string, value: (r) => r.string.name },
      { header: checkHeads.check, value: (r) => r.check.name },
      {
        header: checkHeads.result,
        value: (r) => r.record?.result.replace('_', ' ') ?? checkHeads.notRecorded,
      },
      { header: checkHeads.reason, value: (r) => r.record?.reason },
      { header: checkHeads.figures, value: (r) => r.record && figureWords(sheet, r.check, r.record) },
      { header: checkHeads.whatTheFiguresSay, value: (r) => r.judged?.words.join(' ') },
      {
        header: checkHeads.source,
        value: (r) => (r.judged?.words.length ? r.judged.source : r.check.source),
      },
      { header: checkHeads.note, value: (r) => r.record?.note },
      { header: checkHeads.person, value: (r) => r.record?.person },
      { header: checkHeads.timeUtc, value: (r) => r.record && new Date(r.record.at) },
      { header: checkHeads.recordedUtc, value: (r) => r.record && new Date(r.record.recordedAt) },
      { header: checkHeads.stringSignedBy, value: (r) => r.string.signOff?.person },
      { header: checkHeads.stringSignedUtc, value: (r) => r.string.signOff && new Date(r.string.signOff.at) },
      { header: checkHeads.signatureHolds, value: (r) => r.string.signOff && !r.string.signOff.stale },
      { header: checkHeads.stringMayBeSigned, value: (r) => r.state.maySign },
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
      { header: readingHeads.string, value: (r) => r.string.name },
      { header: readingHeads.units, value: (r) => r.string.units },
      {
        header: readingHeads.stage,
        value: (r) => (r.reading ? STAGE_WORDS[r.reading.stage] : readingHeads.notRead),
      },
      { header: readingHeads.between, value: (r) => r.reading?.kind.replaceAll('_', ' ') },
      { header: readingHeads.voltageV, value: (r) => rounded(r.reading?.voltage) },
      { header: readingHeads.expectedFromV, value: (r) => rounded(r.finding?.expectedLowV) },
      { header: readingHeads.expectedToV, value: (r) => rounded(r.finding?.expectedHighV) },
      {
        header: readingHeads.outcome,
        value: (r) => r.finding?.outcome.replace('_', ' ').replace('cant tell', 'can’t tell'),
      },
      { header: readingHeads.whatItMeans, value: (r) => r.finding?.headline },
      { header: readingHeads.light, value: (r) => r.reading?.light },
      { header: readingHeads.commanded, value: (r) => r.reading?.commanded },
      { header: readingHeads.unitsHeard, value: (r) => r.finding?.heard },
      { header: readingHeads.stringsComparedWith, value: (r) => r.finding?.siblings.join(', ') },
      { header: readingHeads.note, value: (r) => r.reading?.note },
      { header: readingHeads.person, value: (r) => r.reading?.person },
      { header: readingHeads.timeUtc, value: (r) => r.reading && new Date(r.reading.at) },
      { header: readingHeads.recordedUtc, value: (r) => r.reading && new Date(r.reading.recordedAt) },
    ],
    rows,
  );
}
