import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { GET as csvRoute } from '../../src/pages/api/sites/[site]/design.csv';
import { siteDesign as shape } from '../../src/schemas/api/design';
import { asActor } from '../../src/server/db/transaction';
import { designFindings, siteDesign } from '../../src/server/services/design-findings';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';

const HALL = 'Old Tannery Market Hall';
const GALLERY = 'Coopers Wharf Gallery';
const NETLOFT = 'Netloft Terrace';
const NOW = new Date();

let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let stranger: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, GALLERY, NETLOFT]);
  technician = await fleet.actor('technician@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
});
afterAll(() => db.drop());

const of = (name: string, actor = technician, at = NOW) =>
  asActor(actor, (tx) => designFindings(tx, fleet.site(name).id, at));
const exceeded = async (name: string) =>
  (await of(name)).findings.filter((f) => f.outcome === 'exceeded').map((f) => f.check);

describe('design checks of a site', () => {
  it('are made with the site’s own temperatures and the types of its catalogue', async () => {
    const design = shape.parse(await of(HALL));
    expect(design).toMatchObject({ strings: 13, structure: 'other_building', stringsWithoutSlots: [] });
    expect(design.temperatures.coldest.from).toBe('entered');
    expect(design.findings.filter((f) => f.outcome === 'exceeded' || f.outcome === 'cannot_tell')).toEqual(
      [],
    );
    const building = design.findings.filter((f) => f.check === 'string_voltage_building');
    expect(building.flatMap((f) => f.strings)).toHaveLength(13);
    // 17 modules of 49.3 V, −0.27 %/K: the longest string of the hall
    const { value } = design.temperatures.coldest;
    expect(Math.max(...building.map((f) => f.value ?? 0))).toBeCloseTo(
      17 * 49.3 * (1 - 0.0027 * (value - 25)),
      3,
    );
  });

  it('name a connector pair that no document allows, until a manager records one', async () => {
    expect(await exceeded(GALLERY)).toEqual(['connector_module_unit']);
    await db.owner.query(
      `insert into connector_pair (organisation_id, first_id, second_id, evidence, recorded_by)
       select a.organisation_id, least(a.id, b.id), greatest(a.id, b.id), 'Joint statement, edition 2, page 4', $1
       from connector_type a join connector_type b on b.organisation_id = a.organisation_id
       where a.name = 'Halyard 4' and b.name = 'Oxbow 30' and a.organisation_id = $2`,
      [technician.personId, technician.organisationId],
    );
    expect(await exceeded(GALLERY)).toEqual([]);
  });

  it('follow the as-built at the instant asked for', async () => {
    const { id } = fleet.site(HALL);
    await db.owner.query(
      `update placement p set placed_to = $1 from slot sl join string s on s.id = sl.string_id
       where p.slot_id = sl.id and s.site_id = $2 and s.name = 'B3' and sl.position in (5, 9)`,
      [NOW, id],
    );
    const [found] = (await of(HALL)).findings;
    expect(found).toMatchObject({ check: 'slots_without_unit', outcome: 'exceeded', value: 2, safety: true });
    expect(found?.strings.map((s) => s.name)).toEqual(['B3']);
    const before = await of(HALL, technician, new Date(NOW.getTime() - 60_000));
    expect(before.findings.filter((f) => f.outcome === 'exceeded')).toEqual([]);
  });

  it('can’t tell where an inverter has no type or temperatures are only estimated', async () => {
    const { id } = fleet.site(GALLERY);
    await db.owner.query(`update inverter set inverter_type_id = null where site_id = $1`, [id]);
    await db.owner.query(`update site set temperature_min = null, temperature_max = null where id = $1`, [
      id,
    ]);
    const design = await of(GALLERY);
    expect(design.temperatures.coldest.from).toBe('estimated');
    expect(design.findings.filter((f) => f.outcome === 'cannot_tell').map((f) => f.check)).toContain(
      'string_voltage_inverter',
    );
  });

  it('are not there for another organisation', async () => {
    await expect(of(HALL, stranger)).rejects.toMatchObject({ kind: 'not_found' });
    await expect(asActor(stranger, (tx) => siteDesign(tx, fleet.site(HALL).ref, NOW))).rejects.toMatchObject({
      kind: 'not_found',
    });
    const own = await of(NETLOFT, stranger);
    expect(own.structure).toBe('one_or_two_family_dwelling');
    expect(own.findings.find((f) => f.check === 'string_voltage_building')?.limit).toBe(600);
  });

  it('go out as CSV', async () => {
    const response = await ask(csvRoute, {
      actor: technician,
      params: { site: fleet.site(HALL).ref },
      path: '/api/x?show=exceeded',
    });
    const lines = (await response.text()).trim().split('\r\n');
    expect(lines[0]).toContain('outcome,check,strings,figure,limit,unit');
    expect(lines).toHaveLength(2);
    expect(lines[1]).toContain('Slots without a unit');
  });
});
