import { createHash, randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import { CHECK_KEYS, type CheckKey, type Figures } from '../../src/domain/commissioning/checks/definition';
import { insertAttachment } from '../../src/server/queries/attachments';
import { checkOut, latestChecks } from '../../src/server/queries/checks';
import { checksFingerprint } from '../../src/server/services/capture-snapshot';
import { insertRows, known } from '../plant/rows';
import type { SeededPlant } from '../plant/seeded';
import { pictureOf, type Scene } from './pictures';
import { seedReadings } from './readings';

/** What two people have recorded at the site under commissioning before the demo begins: partly done, partly amiss. */

const SITE = 'Old Tannery Market Hall';
const TECHNICIAN = 'technician@lowfield.example';
const MANAGER = 'manager@lowfield.example';
const HOUR = 3600;

const SIGNED = ['A1', 'A2', 'A3', 'B1', 'C1'];
const READY = ['B2', 'C2'];
/** Everything recorded, and something in the way. */
const BLOCKED = ['B3', 'D1'];
/** Only what is done while units go up. */
const BEGUN = ['B4', 'D2'];
const WHILE_MOUNTING: readonly CheckKey[] = CHECK_KEYS.slice(0, 5);

interface Check {
  string_id: number;
  check_name: CheckKey;
  result: string;
  reason: string;
  note: string;
  figures: Figures;
  person_id: number;
  at: string;
  recorded_at: string;
}

export async function seedCommissioningRecords(
  tx: Knex.Transaction,
  plant: SeededPlant,
  sinceS: number,
): Promise<void> {
  const site = plant.sites.get(SITE);
  if (!site) return;
  const technician = known(plant.people, TECHNICIAN, 'the person').id;
  const manager = known(plant.people, MANAGER, 'the person').id;
  const at = (beforeS: number) => new Date((sinceS - beforeS) * 1000).toISOString();
  const { rows: types } = await tx.raw<{ rows: { one: string; other: string | null }[] }>(
    `select a.ref as one, (
       select b.ref from connector_type b
       where b.organisation_id = a.organisation_id and (b.maker, b.family) <> (a.maker, a.family) and b.archived_at is null
         and not exists (select from connector_pair p where p.ended_at is null
           and a.id in (p.first_id, p.second_id) and b.id in (p.first_id, p.second_id))
       order by b.id limit 1) as other
     from connector_type a where a.organisation_id = ? and a.archived_at is null order by a.id limit 1`,
    [site.organisationId],
  );
  const connectors = { one: types[0]?.one, other: types[0]?.other ?? undefined };
  const { rows: insulation } = await tx.raw<{ rows: { most: number | null }[] }>(
    `select max(t.insulation_test_max) as most from string s join unit_type t on t.id = s.unit_type_id where s.site_id = ?`,
    [site.id],
  );
  const tested = insulation[0]?.most ?? null;

  const checks: Check[] = [];
  const add = (name: string, keys: readonly CheckKey[], nth: number): void => {
    const string = known(site.strings, name, 'the string');
    for (const [i, key] of keys.entries()) {
      const { one, other } = connectors;
      const figures = figuresOf(key, nth, { one, other: name === 'B3' ? other : undefined });
      if (key === 'string_current' || (key === 'connectors' && !one)) continue;
      const loose = name === 'D1' && key === 'strain_relief';
      const untested = key === 'insulation' && tested === null;
      const time = 30 * HOUR - nth * 1500 - i * 70;
      checks.push({
        string_id: string.id,
        check_name: key,
        result: loose ? 'fail' : untested ? 'not_applicable' : 'pass',
        reason: loose
          ? 'A loop of the long lead lies on the roof between 6 and 7'
          : untested
            ? 'The maker of the units allows none.'
            : '',
        note: key === 'labels' && nth === 0 ? 'Marking renewed at the north end.' : '',
        figures: key === 'insulation' && tested !== null ? insulationFigures(tested) : figures,
        person_id: technician,
        at: at(time),
        recorded_at: at(time - 6),
      });
    }
  };
  [...SIGNED, ...READY, ...BLOCKED].forEach((name, nth) => add(name, CHECK_KEYS, nth));
  BEGUN.forEach((name, nth) => add(name, WHILE_MOUNTING, nth + 9));
  await writeChecks(tx, site.id, checks);
  await signStrings(tx, site, { person: technician, at: at(22 * HOUR) });
  await supersedeOne(tx, site, known(site.strings, 'B1', 'the string').id, manager, at(20 * HOUR));
  await seedReadings(tx, site, { person: technician, fromS: sinceS - 25 * HOUR });
  await seedPictures(tx, site, technician, at(27 * HOUR));
}

const figuresOf = (
  key: CheckKey,
  nth: number,
  connectors: { one: string | undefined; other: string | undefined },
): Figures => {
  const { one, other } = connectors;
  switch (key) {
    case 'connectors':
      return one ? { moduleLead: one, unitInput: other ?? one } : {};
    case 'earth_continuity':
      return { resistance: Number((0.18 + nth * 0.03).toFixed(2)) };
    case 'voltage_to_earth':
      return { between: 610 + nth, positive: 9 + nth, negative: -(12 - nth) };
    default:
      return {};
  }
};
const insulationFigures = (most: number): Figures => ({
  testVoltage: most >= 1000 ? '1000' : most >= 500 ? '500' : '250',
  resistance: 48,
  unitsState: 'passing',
});

async function writeChecks(db: Knex, siteId: number, checks: readonly Check[]): Promise<void> {
  await insertRows(
    db,
    'install_check',
    {
      site_id: 'int4',
      string_id: 'int4',
      check_name: 'text',
      result: 'text',
      reason: 'text',
      note: 'text',
      figures: 'jsonb',
      person_id: 'int4',
      at: 'timestamptz',
      recorded_at: 'timestamptz',
    },
    checks.map((c) => ({ site_id: siteId, ...c })),
  );
}

type Site = NonNullable<ReturnType<SeededPlant['sites']['get']>>;

async function signStrings(
  tx: Knex.Transaction,
  site: Site,
  sign: { person: number; at: string },
): Promise<void> {
  const records = (await latestChecks(tx, site.id)).map(checkOut);
  await insertRows(
    tx,
    'string_sign_off',
    { site_id: 'int4', string_id: 'int4', person_id: 'int4', at: 'timestamptz', fingerprint: 'text' },
    SIGNED.map((name) => {
      const string = known(site.strings, name, 'the string');
      return {
        site_id: site.id,
        string_id: string.id,
        person_id: sign.person,
        at: sign.at,
        fingerprint: checksFingerprint(records.filter((r) => r.stringId === string.ref)),
      };
    }),
  );
}

/** Recorded anew after the signature: it no longer holds. */
async function supersedeOne(
  tx: Knex.Transaction,
  site: Site,
  stringId: number,
  person: number,
  at: string,
): Promise<void> {
  await tx.raw(
    `insert into install_check (site_id, string_id, check_name, result, note, person_id, at, recorded_at, supersedes)
     select site_id, string_id, check_name, 'pass', 'Two clips added after the storm.', :person, :at, :at, id
     from install_check where site_id = :siteId and string_id = :stringId and check_name = 'strain_relief'`,
    { siteId: site.id, stringId, person, at },
  );
}

const PICTURES: readonly { string: string; check: CheckKey; scene: Scene; name: string }[] = [
  { string: 'A1', check: 'lead_order', scene: 'leads', name: 'Leads A1' },
  { string: 'A1', check: 'labels', scene: 'label', name: 'Marking A1' },
  { string: 'B3', check: 'connectors', scene: 'connector', name: 'Pair at B3-4' },
  { string: 'D1', check: 'strain_relief', scene: 'sagging', name: 'Between D1-6 and D1-7' },
];

async function seedPictures(tx: Knex.Transaction, site: Site, person: number, at: string): Promise<void> {
  const records = await latestChecks(tx, site.id);
  for (const picture of PICTURES) {
    const string = known(site.strings, picture.string, 'the string');
    const subject = records.find((r) => r.stringId === string.ref && r.check === picture.check);
    if (!subject) continue;
    const { data, thumbnail, width, height } = await pictureOf(picture.scene);
    await insertAttachment(tx, {
      ref: randomUUID(),
      organisationId: site.organisationId,
      siteId: site.id,
      stringId: string.id,
      subject: 'install_check',
      subjectRef: subject.ref,
      name: `${picture.name}.jpg`,
      note: '',
      placeKept: false,
      personId: person,
      at,
      mediaType: 'image/jpeg',
      data,
      sha256: createHash('sha256').update(data).digest(),
      width,
      height,
      thumbnail,
    });
  }
}
