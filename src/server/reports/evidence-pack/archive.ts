import { createHash } from 'node:crypto';
import { zipSync, type Zippable } from 'fflate';
import { eventWords } from '../../../domain/verdicts/event-words';
import { csvText, fileName } from '../csv';
import type { StringHistory } from '../../../schemas/api/string';
import type { Evidence, EvidenceAbout } from './data';
import {
  evidenceReadingHeads,
  evidenceAsBuiltHeads,
  evidenceEventHeads,
  evidenceMeterHeads,
  evidenceContents,
} from '../../../words/csv-heads-evidence';

const TEXT = { level: 6 } as const;
/** Pictures are packed already. */
const STORED = { level: 0 } as const;

interface Step {
  at: number;
  values: (number | null)[];
}
/** Lines of one axis side by side, one row a step that any of them knows. */
function rowsOf(histories: readonly StringHistory[]): Step[] {
  const rows = new Map<number, (number | null)[]>();
  histories.forEach((history, column) =>
    history.at.forEach((at, i) => {
      const value = history.values[i] ?? null;
      if (value === null) return;
      const row = rows.get(at) ?? histories.map(() => null);
      row[column] = value;
      rows.set(at, row);
    }),
  );
  return [...rows].map(([at, values]) => ({ at, values })).sort((a, b) => a.at - b.at);
}

export function readingsCsv(histories: readonly StringHistory[]): string {
  return csvText(
    [
      { header: evidenceReadingHeads.timeUtc, value: (r: Step) => new Date(r.at * 1000) },
      ...histories.map((h, i) => ({
        header: evidenceReadingHeads.quantity(h.quantity, h.unit),
        value: (r: Step) => {
          const value = r.values[i] ?? null;
          return value === null ? null : Number(value.toFixed(3));
        },
      })),
    ],
    rowsOf(histories),
  );
}

function asBuiltCsvOf(data: Evidence): string {
  const rows = data.strings.flatMap((s) => s.built.slots.map((slot) => ({ string: s.built, slot })));
  return csvText(
    [
      { header: evidenceAsBuiltHeads.string, value: (r) => r.string.name },
      { header: evidenceAsBuiltHeads.position, value: (r) => r.slot.position },
      { header: evidenceAsBuiltHeads.serial, value: (r) => r.slot.serial },
      { header: evidenceAsBuiltHeads.unitType, value: (r) => r.string.unitType },
      { header: evidenceAsBuiltHeads.moduleType, value: (r) => r.slot.moduleType },
      { header: evidenceAsBuiltHeads.plane, value: (r) => r.string.plane },
      { header: evidenceAsBuiltHeads.inverter, value: (r) => r.string.inverter },
      { header: evidenceAsBuiltHeads.input, value: (r) => r.string.input },
      { header: evidenceAsBuiltHeads.zone, value: (r) => r.string.zone },
      { header: evidenceAsBuiltHeads.transmitters, value: (r) => r.string.transmitters.join('; ') },
      { header: evidenceAsBuiltHeads.place, value: (r) => r.slot.place },
    ],
    rows,
  );
}

const eventsCsvOf = (data: Evidence): string =>
  csvText(
    [
      { header: evidenceEventHeads.timeUtc, value: (e) => new Date(e.at) },
      { header: evidenceEventHeads.string, value: (e) => e.stringName },
      { header: evidenceEventHeads.kind, value: (e) => e.kind },
      { header: evidenceEventHeads.what, value: (e) => eventWords(e.kind, e.detail).words },
    ],
    data.events,
  );

const meterCsvOf = (data: Evidence): string =>
  csvText(
    [
      { header: evidenceMeterHeads.timeUtc, value: (r) => new Date(r.at) },
      { header: evidenceMeterHeads.string, value: (r) => r.string },
      { header: evidenceMeterHeads.stage, value: (r) => r.stage },
      { header: evidenceMeterHeads.between, value: (r) => r.kind },
      { header: evidenceMeterHeads.voltageV, value: (r) => r.voltage },
      { header: evidenceMeterHeads.whatItMeans, value: (r) => r.finding?.headline },
      { header: evidenceMeterHeads.by, value: (r) => r.person },
    ],
    data.meterReadings,
  );

/**
 * Everything of a case in one ZIP: the PDF, tables as CSV, photos, and a list of what is in it with the SHA-256 of each.
 * @param readings by string name: tables of the day of the opening and of the week up to it
 */
export function evidenceZip(
  data: Evidence,
  about: EvidenceAbout,
  pdf: Buffer,
  readings: ReadonlyMap<string, { day: readonly StringHistory[]; week: readonly StringHistory[] }>,
  photos: ReadonlyMap<string, Buffer>,
): Uint8Array {
  const files: [name: string, bytes: Uint8Array, packed: boolean][] = [];
  const text = (name: string, content: string) => files.push([name, Buffer.from(content, 'utf8'), true]);
  files.push(['evidence.pdf', pdf, false]);
  text('as-built.csv', asBuiltCsvOf(data));
  text('events.csv', eventsCsvOf(data));
  text('meter-readings.csv', meterCsvOf(data));
  // names of strings may become one file name: a number keeps them apart
  let n = 0;
  for (const [name, { day, week }] of readings) {
    n += 1;
    const stem = `readings/${String(n).padStart(2, '0')}-${fileName(name)}`;
    text(`${stem}-day.csv`, readingsCsv(day));
    text(`${stem}-week.csv`, readingsCsv(week));
  }
  data.photos.forEach((photo, i) => {
    const bytes = photos.get(photo.id);
    const stem = fileName(photo.name.replace(/\.[A-Za-z0-9]{1,5}$/, ''));
    if (bytes) files.push([`photos/${String(i + 1).padStart(2, '0')}-${stem}.jpg`, bytes, false]);
  });
  const contents = [
    evidenceContents.title(data.case.number, data.case.title),
    evidenceContents.madeBy(data.case.siteName, about.at.toISOString(), about.madeBy),
    evidenceContents.fingerprint(about.fingerprint),
    '',
    ...files.map(([name, bytes]) => `${createHash('sha256').update(bytes).digest('hex')}  ${name}`),
    '',
  ].join('\r\n');
  const folder = fileName(`case-${data.case.number}`);
  const zippable: Zippable = {};
  for (const [name, bytes, packed] of [...files, ['contents.txt', Buffer.from(contents), true] as const])
    zippable[`${folder}/${name}`] = [new Uint8Array(bytes), packed ? TEXT : STORED];
  return zipSync(zippable, { mtime: about.at });
}
