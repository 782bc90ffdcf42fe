import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import { readingAround } from '../../src/domain/commissioning/readings/around';
import { judgeReading } from '../../src/domain/commissioning/readings/judge-reading';
import { vocOf } from '../../src/domain/photovoltaics/module/open-circuit';
import { readingInput, type ReadingInput } from '../../src/schemas/api/readings';
import { moduleTypesOf, stringSheets, unitTypesOf } from '../../src/server/queries/captured-site';
import { insertReading } from '../../src/server/queries/readings';
import type { SeededPlant } from '../plant/seeded';

type Site = NonNullable<ReturnType<SeededPlant['sites']['get']>>;

interface Taken {
  string: string;
  /** Share of what all modules would give. */
  share: number;
  kind?: ReadingInput['kind'];
  light?: ReadingInput['light'];
  note?: string;
}
/** One round along the roof, minutes apart. What was amiss is read again only at D2. */
const ROUND: readonly Taken[] = [
  { string: 'A1', share: 1.002 },
  { string: 'A1', share: 0.016, kind: 'positive_to_earth' },
  { string: 'A1', share: -0.02, kind: 'negative_to_earth' },
  { string: 'A2', share: 0.998 },
  { string: 'A3', share: 1.001 },
  { string: 'B1', share: 0.997 },
  { string: 'B1', share: 0.021, kind: 'positive_to_earth' },
  { string: 'B1', share: -0.017, kind: 'negative_to_earth' },
  { string: 'B2', share: 1.003 },
  { string: 'B3', share: 0.999 },
  { string: 'C1', share: 1.0 },
  { string: 'C2', share: 0.996 },
  { string: 'D1', share: 1.002 },
  { string: 'D2', share: -1.001, note: 'Marking of the home run is the wrong way round' },
  { string: 'D2', share: 0.999, note: 'Marking put right' },
  { string: 'D3', share: 0.0045, note: 'A plug at the row’s end was not home; to be read again' },
  { string: 'C3', share: 0.93, light: 'dull' },
];

export async function seedReadings(
  tx: Knex.Transaction,
  site: Site,
  round: { person: number; fromS: number },
): Promise<void> {
  const from = new Date(round.fromS * 1000);
  const sheets = await stringSheets(tx, site.id, from);
  const sheet = {
    unitTypes: await unitTypesOf(tx, site.id),
    moduleTypes: await moduleTypesOf(tx, site.id),
    strings: sheets.map((s) => ({ ...s, readings: [] as ReadingInput[] })),
  };
  for (const [i, taken] of ROUND.entries()) {
    const string = sheet.strings.find((s) => s.name === taken.string);
    const module = sheet.moduleTypes.find((m) => m.id === string?.moduleTypeId);
    if (!string || !module) continue;
    const kind = taken.kind ?? 'positive_to_negative';
    const before = string.readings.find((r) => r.kind === kind);
    const light = taken.light ?? 'bright';
    const one = light === 'dull' ? vocOf(module, 160, 14) : vocOf(module, 690, 31);
    const input = readingInput.parse({
      ref: randomUUID(),
      stringId: string.id,
      stage: 'before_energising',
      kind,
      light,
      voltage: Number((string.units * one * taken.share).toFixed(1)),
      note: taken.note ?? '',
      at: new Date(from.getTime() + i * 80_000).toISOString(),
      supersedes: before?.ref ?? null,
    });
    const around = readingAround(sheet, string.id, input);
    const names = new Set(around.siblings.map((s) => s.name));
    await insertReading(tx, {
      siteId: site.id,
      stringId: string.dbId,
      personId: round.person,
      input,
      finding: judgeReading(input, around),
      siblings: sheet.strings
        .filter((s) => names.has(s.name))
        .flatMap((s) => s.readings.filter((r) => r.kind === 'positive_to_negative').map((r) => r.ref)),
    });
    string.readings = [...string.readings.filter((r) => r.kind !== kind), input];
  } // sent at once: there was a network
  await tx.raw(`update meter_reading set recorded_at = at + interval '4 seconds' where site_id = ?`, [
    site.id,
  ]);
}
