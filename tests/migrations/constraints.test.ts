import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { testDatabase, type TestDatabase } from '../support/database';
import {
  insert,
  makeScene,
  moduleTypeRow,
  SINCE,
  siteRow,
  stringRow,
  unitTypeRow,
  type Scene,
} from './scene';

let db: TestDatabase;
let here: Scene;
let there: Scene;

beforeAll(async () => {
  db = await testDatabase();
  here = await makeScene(db.owner, 'here');
  there = await makeScene(db.owner, 'there');
});
afterAll(() => db.drop());

interface Refusal {
  code?: string;
  constraint?: string;
}
const CODES = {
  check: '23514',
  unique: '23505',
  foreign: '23503',
  exclusion: '23P01',
  missing: '23502',
} as const;

/** Runs in a transaction that is always undone; gives what the database refused with, checked at commit. */
async function refusal(work: (row: typeof insert) => Promise<unknown>): Promise<Refusal> {
  const client = await db.owner.connect();
  try {
    await client.query('begin');
    await work((_, table, row) => insert(client, table, row));
    await client.query('set constraints all immediate');
    return {};
  } catch (error) {
    return error as Refusal;
  } finally {
    await client.query('rollback');
    client.release();
  }
}
const add = (table: string, row: Parameters<typeof insert>[2]) =>
  refusal((into) => into(db.owner, table, row));
const onString = (change: Parameters<typeof insert>[2]) =>
  add('string', { ...stringRow(here, 'B1', 7), ...change });

describe('a string', () => {
  it('as drawn is taken', async () => {
    expect(await onString({})).toEqual({});
  });

  it('that is monitored has a logger and a place in its roster', async () => {
    const expected = { code: CODES.check, constraint: 'string_monitored_has_logger' };
    expect(await onString({ logger_id: null })).toMatchObject(expected);
    expect(await onString({ roster_index: null })).toMatchObject(expected);
  });

  it('that is shutdown-only names its transmitters', async () => {
    const plain = {
      unit_type_id: here.shutdownOnlyType,
      kind: 'shutdown_only',
      logger_id: null,
      roster_index: null,
    };
    expect(await onString(plain)).toMatchObject({
      code: CODES.check,
      constraint: 'string_shutdown_only_names_transmitters',
    });
    const named = await refusal(async (into) => {
      const string = await into(db.owner, 'string', { ...stringRow(here, 'B1', 7), ...plain });
      await into(db.owner, 'transmitter_string', {
        transmitter_id: here.transmitter,
        string_id: string,
        site_id: here.site,
      });
    });
    expect(named).toEqual({});
  });

  it('that is shutdown-only keeps its last transmitter', async () => {
    const client = await db.owner.connect();
    try {
      await client.query('begin');
      const string = await insert(client, 'string', {
        ...stringRow(here, 'B1', 7),
        ...{
          unit_type_id: here.shutdownOnlyType,
          kind: 'shutdown_only',
          logger_id: null,
          roster_index: null,
        },
      });
      await insert(client, 'transmitter_string', {
        transmitter_id: here.transmitter,
        string_id: string,
        site_id: here.site,
      });
      await client.query('set constraints all immediate');
      await expect(
        client.query('delete from transmitter_string where string_id = $1', [string]),
      ).rejects.toMatchObject({
        constraint: 'string_shutdown_only_names_transmitters',
      });
    } finally {
      await client.query('rollback');
      client.release();
    }
  });

  it('is of the kind of its unit type', async () => {
    expect(await onString({ kind: 'optimizing' })).toMatchObject({ code: CODES.foreign });
  });

  it('has its parts on its own site', async () => {
    for (const part of ['plane', 'input', 'zone', 'logger'] as const)
      expect(await onString({ [`${part}_id`]: there[part] }), part).toMatchObject({ code: CODES.foreign });
    expect(
      await add('transmitter_string', {
        transmitter_id: there.transmitter,
        string_id: here.string,
        site_id: here.site,
      }),
    ).toMatchObject({ code: CODES.foreign });
  });

  it('has a name of its own on its site, and its own place in the roster', async () => {
    expect(await onString({ name: 'A1' })).toMatchObject({ code: CODES.unique });
    expect(await onString({ roster_index: 0 })).toMatchObject({ code: CODES.unique });
    expect(await onString({ name: '  ' })).toMatchObject({ code: CODES.check });
  });

  it.each([0, 64])('has 1 to 63 slots, not %i', async (slots) => {
    expect(await onString({ slots })).toMatchObject({ code: CODES.check });
  });
});

describe('a slot', () => {
  const slot = (change: Parameters<typeof insert>[2]) =>
    add('slot', {
      site_id: here.site,
      string_id: here.string,
      position: 9,
      module_type_id: here.moduleType,
      ...change,
    });

  it('has a position of its own in its string', async () => {
    expect(await slot({})).toEqual({});
    expect(await slot({ position: 1 })).toMatchObject({ code: CODES.unique });
  });

  it.each([0, -1, 64])('is not at position %i', async (position) => {
    expect(await slot({ position })).toMatchObject({ code: CODES.check });
  });

  it('is on the site of its string', async () => {
    expect(await slot({ site_id: there.site })).toMatchObject({ code: CODES.foreign });
  });
});

describe('a unit', () => {
  const unit = (change: Parameters<typeof insert>[2]) =>
    add('unit', {
      organisation_id: here.organisation,
      unit_type_id: here.monitoredType,
      serial: 'UN-9',
      ...change,
    });

  it('has a serial of its own in its organisation', async () => {
    expect(await unit({})).toEqual({});
    expect(await unit({ serial: 'UN-HERE-1' })).toMatchObject({ code: CODES.unique });
    expect(await unit({ serial: 'UN-THERE-1' })).toEqual({});
  });

  it.each(['', 'abc', 'un-1234', 'UN 1234', '-UN123', `UN${'1'.repeat(40)}`])(
    'has no serial "%s"',
    async (serial) => {
      expect(await unit({ serial })).toMatchObject({ code: CODES.check });
    },
  );

  it('is at one place at a time', async () => {
    const twice = await add('placement', {
      site_id: here.site,
      unit_id: here.units[0] ?? 0,
      slot_id: here.slots[1] ?? 0,
      placed_from: SINCE,
      placed_to: new Date(+SINCE + 1000),
    });
    expect(twice).toMatchObject({ code: CODES.exclusion });
    expect(['placement_one_place_at_a_time', 'placement_one_unit_at_a_time']).toContain(twice.constraint);
  });

  it('leaves a slot before another takes it, and may come at that very moment', async () => {
    const at = new Date('2026-07-01T00:00:00Z');
    const swap = await refusal(async (into) => {
      const spare = await into(db.owner, 'unit', {
        organisation_id: here.organisation,
        unit_type_id: here.monitoredType,
        serial: 'UN-SPARE',
      });
      const slot = await into(db.owner, 'slot', {
        site_id: here.site,
        string_id: here.string,
        position: 10,
        module_type_id: here.moduleType,
      });
      const stay = { site_id: here.site, unit_id: spare, slot_id: slot };
      await into(db.owner, 'placement', { ...stay, placed_from: SINCE, placed_to: at });
      await into(db.owner, 'placement', { ...stay, placed_from: at });
    });
    expect(swap).toEqual({});
    expect(
      await add('placement', {
        site_id: here.site,
        unit_id: here.units[0] ?? 0,
        slot_id: here.slots[0] ?? 0,
        placed_from: new Date('2026-01-02'),
        placed_to: new Date('2026-01-01'),
      }),
    ).toMatchObject({ code: CODES.check });
  });
});

describe('figures that no equipment has', () => {
  it.each([
    ['module_type', { voc_ref: 0 }],
    ['module_type', { vmp_ref: 50 }],
    ['module_type', { imp_ref: 11 }],
    ['module_type', { beta_voc: 0.003 }],
    ['module_type', { cells_in_series: 0 }],
    ['unit_type', { kind: 'something' }],
    ['unit_type', { measures: 'none' }],
    ['unit_type', { shutdown_voltage_min: 0.9 }],
    ['unit_type', { shutdown_voltage_max: 9 }],
    ['unit_type', { bypass_voltage: 0.5 }],
    ['site', { latitude: 91 }],
    ['site', { longitude: 181 }],
    ['site', { altitude: 9000 }],
    ['site', { rule_set: 'own' }],
    ['site', { name: ' ' }],
    ['site', { report_interval_s: 1 }],
    ['plane', { surface_tilt: 91 }],
    ['plane', { surface_azimuth: 360 }],
    ['inverter', { ac_power_max: 0 }],
    ['input', { number: 0 }],
    ['gateway', { number: 256 }],
    ['sensor', { plane_id: null }],
  ] as const)('%s %j is refused', async (table, change) => {
    const rows = {
      module_type: { ...moduleTypeRow(here.organisation), name: 'Another' },
      unit_type: unitTypeRow(here.organisation, 'Another', 'monitored'),
      site: siteRow(here.organisation, 'Another'),
      plane: { site_id: here.site, name: 'West', surface_tilt: 20, surface_azimuth: 270 },
      inverter: { site_id: here.site, name: 'Inverter 2', ac_power_max: 5000 },
      input: { site_id: here.site, inverter_id: here.inverter, number: 2 },
      gateway: { site_id: here.site, logger_id: here.logger, number: 1, name: 'Gateway 1' },
      sensor: {
        site_id: here.site,
        logger_id: here.logger,
        plane_id: here.plane,
        number: 1,
        kind: 'poa_global',
      },
    };
    expect(await add(table, rows[table])).toEqual({});
    expect(await add(table, { ...rows[table], ...change })).toMatchObject({ code: CODES.check });
  });
});

describe('people and what they do', () => {
  const person = (change: Parameters<typeof insert>[2]) =>
    add('person', {
      organisation_id: here.organisation,
      email: 'new@here.example',
      name: 'New',
      role: 'analyst',
      password_hash: 'none',
      ...change,
    });

  it('have an address that nobody else has, in any writing', async () => {
    expect(await person({})).toEqual({});
    expect(await person({ email: 'MANAGER@There.example' })).toMatchObject({ code: CODES.unique });
    expect(await person({ email: 'nobody' })).toMatchObject({ code: CODES.check });
  });

  it('have one of the four roles', async () => {
    expect(await person({ role: 'owner' })).toMatchObject({ code: CODES.check });
  });

  it('run one roll call a site at a time, with somebody on site', async () => {
    const call = { site_id: here.site, started_by: here.person, person_on_site: 'Ines Varga' };
    expect(await add('roll_call', call)).toEqual({});
    expect(await add('roll_call', { ...call, person_on_site: ' ' })).toMatchObject({ code: CODES.check });
    const two = await refusal(async (into) => {
      await into(db.owner, 'roll_call', call);
      await into(db.owner, 'roll_call', call);
    });
    expect(two).toMatchObject({ code: CODES.unique, constraint: 'roll_call_one_open' });
  });

  it('say why a check does not apply', async () => {
    const check = {
      ...{
        site_id: here.site,
        string_id: here.string,
        check_name: 'lead_dress',
        person_id: here.person,
        at: SINCE,
      },
      result: 'not_applicable',
    };
    expect(await add('install_check', check)).toMatchObject({ code: CODES.check });
    expect(await add('install_check', { ...check, reason: 'ground mount' })).toEqual({});
  });
});

it('a command is in force in a zone or at a transmitter, never both, never neither', async () => {
  const command = { site_id: here.site, in_force: 'initiator', since: SINCE };
  expect(await add('command', { ...command, zone_id: here.zone })).toEqual({});
  expect(await add('command', command)).toMatchObject({ code: CODES.check });
  expect(
    await add('command', { ...command, zone_id: here.zone, transmitter_id: here.transmitter }),
  ).toMatchObject({
    code: CODES.check,
  });
  expect(await add('command', { ...command, zone_id: there.zone })).toMatchObject({ code: CODES.foreign });
});
