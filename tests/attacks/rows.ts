import { createHash, randomUUID } from 'node:crypto';
import type pg from 'pg';

type Row = Record<string, unknown>;

async function insert(owner: pg.Pool, table: string, row: Row): Promise<number> {
  const names = Object.keys(row);
  const { rows } = await owner.query<{ id: number }>(
    `insert into ${table} (${names.join(', ')}) values (${names.map((_, i) => `$${i + 1}`).join(', ')}) returning id`,
    Object.values(row),
  );
  return rows[0]?.id ?? 0;
}
const hash = (text: string): Buffer => createHash('sha256').update(text).digest();

interface Place {
  organisation: number;
  site: number;
  string: number;
  zone: number;
  logger: number;
  person: number;
}
async function placeOf(owner: pg.Pool, site: number): Promise<Place> {
  const { rows } = await owner.query<Place>(
    `select s.organisation_id as organisation, s.id as site,
            (select id from string where site_id = s.id order by id limit 1) as string,
            (select id from zone where site_id = s.id order by id limit 1) as zone,
            (select id from logger where site_id = s.id order by id limit 1) as logger,
            (select id from person where organisation_id = s.organisation_id and role = 'manager' order by id limit 1) as person
     from site s where s.id = $1`,
    [site],
  );
  const [place] = rows;
  if (!place) throw new Error(`There is no site ${site}.`);
  return place;
}

/** What people write down about a site and its organisation, one of each that has an identifier in an address. */
export async function writeOneOfEach(owner: pg.Pool, siteId: number): Promise<void> {
  const { organisation, site, string, zone, logger, person } = await placeOf(owner, siteId);
  const at = new Date(Date.now() - 3_600_000);
  const later = new Date(at.getTime() + 7_200_000);
  const day = at.toISOString().slice(0, 10);
  const unique = randomUUID();
  const add = (table: string, row: Row) => insert(owner, table, row);

  await add('share_link', { site_id: site, label: 'Lobby', token_hash: hash(unique), created_by: person });
  await add('invitation', {
    organisation_id: organisation,
    email: `${unique}@guests.example`,
    name: 'Vera Lund',
    role: 'analyst',
    token_hash: hash(unique),
    invited_by: person,
    expires_at: new Date(Date.now() + 86_400_000),
  });
  const file = {
    organisation_id: organisation,
    site_id: site,
    subject: 'site',
    name: 'roof.jpg',
    media_type: 'image/jpeg',
    byte_size: 4,
    sha256: hash(unique),
    person_id: person,
    at,
  };
  const attachment = await add('attachment', file);
  for (const variant of ['full', 'thumbnail'])
    await owner.query(
      `insert into attachment_data (attachment_id, variant, media_type, data) values ($1, $2, 'image/jpeg', $3)`,
      [attachment, variant, Buffer.from([255, 216, 255, 217])],
    );
  const byHand = { site_id: site, string_id: string, person_id: person, at };
  await add('meter_reading', {
    ...byHand,
    stage: 'before_energising',
    reading_kind: 'positive_to_negative',
    light: 'bright',
    voltage: 8.4,
    note: 'as found',
  });
  await add('install_check', { ...byHand, check_name: 'strain_relief', result: 'fail', note: 'loose' });
  await add('string_sign_off', {
    site_id: site,
    string_id: string,
    person_id: person,
    fingerprint: '0'.repeat(64),
  });
  await add('accepted_gap', {
    site_id: site,
    step: 'checks',
    gap: 'checks/none',
    words: 'One check is missing',
    reason: 'seen on site',
    person_id: person,
  });
  await add('roll_call', {
    site_id: site,
    started_by: person,
    person_on_site: 'Per Aalto',
    started_at: at,
    stopped_at: at,
  });
  await add('isolation', {
    site_id: site,
    string_id: string,
    string_name: 'A1',
    started_by: person,
    person_on_site: 'Per Aalto',
    started_at: at,
    stopped_at: at,
  });
  const draft = await add('shutdown_test_draft', { site_id: site, zone_id: zone, started_by: person });
  await add('shutdown_test_act', {
    ref: randomUUID(),
    draft_id: draft,
    site_id: site,
    kind: 'caution_accepted',
    body: { kind: 'caution_accepted', name: 'Per Aalto' },
    person_id: person,
    at,
  });
  await add('annotation', { site_id: site, from_at: at, text: 'Scaffold in the way', created_by: person });
  await add('planned_work', {
    site_id: site,
    starts_at: at,
    ends_at: later,
    reason: 'Roof works',
    created_by: person,
  });
  await add('tariff', { site_id: site, from_on: day, price_kwh: 0.2, created_by: person });
  const file2 = {
    site_id: site,
    number: 100_000 + site,
    organisation_id: organisation,
    title: 'Loose lead',
    what: 'A1',
  };
  const caseId = await add('case_file', { ...file2, origin: 'hand' });
  await add('case_entry', { case_id: caseId, site_id: site, kind: 'note', body: 'Bring spares' });
  await add('notice', {
    organisation_id: organisation,
    person_id: person,
    event_key: unique,
    kind: 'case',
    headline: 'A case was opened',
    href: '/cases',
  });
  await add('message', {
    organisation_id: organisation,
    kind: 'handover',
    event_key: unique,
    to_address: 'owner@guests.example',
    to_name: 'Ruth Abara',
    subject: 'Your roof',
    text_body: 'Your roof',
    html_body: '<p>Your roof</p>',
    not_before: new Date('2100-01-01'),
  });
  await add('webhook', {
    organisation_id: organisation,
    name: 'Desk',
    url: 'https://desk.example/hook',
    secret: 'a secret of the tests',
    kinds: ['case'],
    created_by: person,
    active: false,
  });
  await add('saved_view', {
    organisation_id: organisation,
    person_id: person,
    list: 'fleet',
    name: `Mine ${site}`,
  });
  await add('api_token', {
    organisation_id: organisation,
    person_id: person,
    name: 'Desk',
    scopes: ['read'],
    hash: hash(unique),
    ending: 'abcd',
    expires_at: later,
  });
  await add('gateway', { site_id: site, logger_id: logger, number: 200, name: 'North ridge' });
}

/** What only its own feature can read back: for addresses that somebody else asks for. */
export async function writeSealed(owner: pg.Pool, siteId: number): Promise<void> {
  const { organisation, site, person } = await placeOf(owner, siteId);
  const at = new Date();
  const add = (table: string, row: Row) => insert(owner, table, row);
  await add('handover_pack', {
    site_id: site,
    version: 1,
    made_by: person,
    made_at: at,
    fingerprint: '0'.repeat(64),
    data: {},
    pdf: Buffer.from('%PDF-1.4'),
    csv: Buffer.from('a,b\r\n'),
  });
  await add('shutdown_test', {
    site_id: site,
    at,
    made_by: 'Per Aalto',
    result: 'passed',
    strings: 1,
  });
  await add('history_import', {
    site_id: site,
    file_name: 'year.csv',
    content_hash: hash('year'),
    layout: {},
    rows: 1,
    readings: 1,
    cells_left_out: 0,
    doubles: 0,
    from_at: at,
    to_at: at,
    made_by: person,
  });
  await add('cause', {
    site_id: site,
    key: 'stuck:1',
    kind: 'stuck',
    headline: 'One unit is stuck',
    evidence: 'It reports so',
    confidence: 0.9,
    since: at,
    opened_at: at,
    changed_at: at,
  });
  const { rows: hooks } = await owner.query<{ id: number }>(
    'select id from webhook where organisation_id = $1',
    [organisation],
  );
  await add('webhook_delivery', {
    webhook_id: hooks[0]?.id,
    organisation_id: organisation,
    event_key: 'x',
    kind: 'case',
    body: '{}',
  });
  const { rows } = await owner.query<{ id: number }>(
    'select id from connector_type where organisation_id = $1 order by id limit 2',
    [organisation],
  );
  const first =
    rows[0]?.id ??
    (await add('connector_type', {
      organisation_id: organisation,
      name: 'Half A',
      maker: 'Kell',
      family: 'K4',
      voltage_max: 1500,
      current_max: 30,
    }));
  const second =
    rows[1]?.id ??
    (await add('connector_type', {
      organisation_id: organisation,
      name: 'Half B',
      maker: 'Kell',
      family: 'K4',
      voltage_max: 1500,
      current_max: 30,
    }));
  const { rowCount: paired } = await owner.query('select from connector_pair where organisation_id = $1', [
    organisation,
  ]);
  if (paired) return;
  await add('connector_pair', {
    organisation_id: organisation,
    first_id: first,
    second_id: second,
    evidence: 'Listed as intermatable',
    recorded_by: person,
  });
}
