import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { Actor } from '../../src/domain/access/permissions';
import { database } from '../../src/server/db/pools';
import { asActor } from '../../src/server/db/transaction';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { nightsDue } from '../../src/server/jobs/nights-due';
import { judgeNight } from '../../src/server/jobs/output-night';
import { rollUpDirty } from '../../src/server/jobs/roll-up';
import { ensureDaysAhead, setRollupWatermark } from '../../src/server/queries/rollup';
import { siteFiguresCsv } from '../../src/server/reports/figures/csv';
import { monthReportPdf } from '../../src/server/reports/figures/month-report';
import { siteFigures } from '../../src/server/services/figures';
import { readHistory } from '../../src/server/services/string-history';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { frameOf, openSockets, TestLogger, type Sockets } from '../support/ingest';
import { pdfPages } from '../support/pdf';

/**
 * Loggers of two sites whose clocks change report day and night across both changes of a year: what they sent comes to
 * the same in frames, days, nights, figures and charts, nothing twice and nothing lost. One site's units report
 * themselves, of the other the inputs are all that is known.
 */
const CLINIC = 'Weirside Clinic';
const GALLERY = 'Coopers Wharf Gallery';
const ZONE = 'Europe/Berlin';
const SPRING = ['2026-03-28', '2026-03-29', '2026-03-30'];
const AUTUMN = ['2026-10-24', '2026-10-25', '2026-10-26'];
const HOURS = new Map(
  [...SPRING, ...AUTUMN].map((d) => [d, d === '2026-03-29' ? 23 : d === '2026-10-25' ? 25 : 24]),
);
const INTERVAL_S = 300;
const s = (iso: string): number => Date.parse(iso) / 1000;
/** From local midnight to local midnight, 71 hours and 73. */
const SPANS = [
  { fromS: s('2026-03-27T23:00Z'), toS: s('2026-03-30T22:00Z') },
  { fromS: s('2026-10-23T22:00Z'), toS: s('2026-10-26T23:00Z') },
];
const TIMES = SPANS.flatMap(({ fromS, toS }) =>
  Array.from({ length: (toS - fromS) / INTERVAL_S }, (_, k) => fromS + k * INTERVAL_S),
);
/** Both hours of the night of 25 October that the clock calls two. */
const CALLED_TWO = TIMES.filter((t) => t >= s('2026-10-25T00:00Z') && t < s('2026-10-25T02:00Z'));

const wall = new Intl.DateTimeFormat('sv-SE', { timeZone: ZONE });
const localDay = (atS: number): string => wall.format(atS * 1000);
/** Each hour of a span has a level of its own, so that one in the wrong place shows. */
const level = (atS: number): number => 20 + (Math.floor(atS / 3600) % 73);
/** Sum over a local day of what each report stands for. */
const hourly = (day: string, of: (atS: number) => number): number =>
  TIMES.reduce((sum, t) => sum + (localDay(t) === day ? (of(t) * INTERVAL_S) / 3600 : 0), 0);
const light = (atS: number): number =>
  Math.max(0, 800 * Math.sin(((((atS / 3600) % 24) - 5) * Math.PI) / 13));

let db: TestDatabase;
let fleet: TestFleet;
let clinic: SeededSite;
let gallery: SeededSite;
let sockets: Sockets;
let analyst: Actor;

beforeAll(async () => {
  process.env.RAW_KEPT_DAYS = '3660'; // the changes of one year are told whenever this runs
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, GALLERY], s('2026-01-15T00:00Z'));
  clinic = fleet.site(CLINIC);
  gallery = fleet.site(GALLERY);
  await db.owner.query(
    `update site set stage = 'operating', time_zone = $1, latitude = 48, longitude = 11, report_interval_s = $2`,
    [ZONE, INTERVAL_S],
  );
  analyst = await fleet.actor('analyst@lowfield.example');
  for (const { fromS, toS } of SPANS)
    await ensureDaysAhead(database('ingest'), new Date(fromS * 1000), new Date(toS * 1000));
  await startIngest();
  sockets = await openSockets();
}, 240_000);
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});

const arrive = (site: SeededSite): Promise<TestLogger> => {
  const serial = [...site.loggers.keys()][0] ?? '';
  return TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
};
function pieces<T>(list: readonly T[], most: number): T[][] {
  return Array.from({ length: Math.ceil(list.length / most) }, (_, k) =>
    list.slice(k * most, (k + 1) * most),
  );
}

/** Two strings of the clinic, its inverters and its sensor, at these times. */
async function reportClinic(logger: TestLogger, times: readonly number[]): Promise<void> {
  const { strings, inverters, sensors } = logger.roster;
  for (const part of pieces(times, 200)) {
    const frames = strings.slice(0, 2).flatMap(({ index, serials }) =>
      part.map((at) => ({
        at,
        string: index,
        frame: frameOf(serials.length, 'both', 1, { current: serials.map(() => 100 * level(at)) }),
      })),
    );
    await logger.durable(logger.frames(frames));
    const common = { energy: null, status: 'running', powerLimit: null, insulation: null };
    const flags = { arcFlag: false, earthFaultFlag: false };
    await logger.durable({
      type: 'inverters',
      rows: inverters.flatMap((i) =>
        part.map((at) => ({ at, inverter: i.name, acPower: 100 * level(at), ...common, ...flags })),
      ),
    });
    await logger.durable({
      type: 'weather',
      rows: part.map((at) => ({
        at,
        sensor: sensors[0]?.number,
        irradiance: Math.round(light(at)),
        temperatureAir: 150,
        temperatureModule: 250,
        windSpeed: 10,
      })),
    });
  }
}

/** The input of the gallery's first string, at these times. */
async function reportGallery(logger: TestLogger, times: readonly number[]): Promise<void> {
  const [inverter] = logger.roster.inverters;
  for (const part of pieces(times, 1000))
    await logger.durable({
      type: 'inputs',
      rows: part.map((at) => ({
        at,
        inverter: inverter?.name,
        input: inverter?.inputs[0],
        voltage: 4000,
        current: 10 * level(at),
      })),
    });
}

const days = async () =>
  (
    await db.owner.query<{ name: string; day: string; frames: number; energy: number; units: number }>(
      `select s.name, d.day::text, d.frames, d.energy, (select sum(e)::int from unnest(d.unit_energy) e) as units
       from string_day d join string s on s.id = d.string_id where d.site_id = $1 order by s.id, d.day`,
      [clinic.id],
    )
  ).rows;
/** Equal but for what is lost by rounding to whole Wh: an hour more or less is forty times as much. */
const near = (figure: number, right: number): boolean => Math.abs(figure / right - 1) < 0.001;
const UNITS = 12;
const stringWh = (day: string): number => hourly(day, (t) => (UNITS * 38 * level(t)) / 10);

describe('across both changes of the clock', { timeout: 300_000 }, () => {
  it('every report is kept once, also where both hours called two are sent again', async () => {
    const logger = await arrive(clinic);
    expect(logger.roster.strings[0]?.serials).toHaveLength(UNITS);
    await reportClinic(logger, TIMES);
    await reportClinic(logger, CALLED_TWO);
    await logger.end();
    const other = await arrive(gallery);
    await reportGallery(other, TIMES);
    await reportGallery(other, CALLED_TWO);
    await other.end();
    const { rows } = await db.owner.query<{
      frames: number;
      inputs: number;
      inverters: number;
      late: number;
    }>(
      `select (select count(*)::int from string_frame) as frames, (select count(*)::int from input_frame) as inputs,
              (select count(*)::int from inverter_frame) as inverters, (select count(*)::int from late_frame) as late`,
    );
    expect(rows[0]).toEqual({
      frames: 2 * TIMES.length,
      inputs: TIMES.length,
      inverters: clinic.inverters.size * TIMES.length,
      late: 0,
    });
  });

  it('days of 23 and 25 hours sum up what was sent in them, as often as they are summed up', async () => {
    expect(await rollUpDirty()).toBeGreaterThan(0);
    const first = await days();
    for (const d of first) {
      const where = `${d.name} on ${d.day}`;
      expect([where, d.frames]).toEqual([where, 12 * (HOURS.get(d.day) ?? 0)]);
      expect([where, near(d.energy, stringWh(d.day)), near(d.units, stringWh(d.day))]).toEqual([
        where,
        true,
        true,
      ]);
    }
    expect(first.map((d) => d.day)).toEqual([...SPRING, ...AUTUMN, ...SPRING, ...AUTUMN]);
    const quarters = await db.owner.query<{ day: string; n: number }>(
      `select (at at time zone $1)::date::text as day, count(*)::int as n from string_quarter group by 1 order by 1`,
      [ZONE],
    );
    expect(quarters.rows).toEqual([...HOURS].map(([day, hours]) => ({ day, n: 2 * 4 * hours })));
    const site = await db.owner.query<{ day: string; due: number; ac: number; complete: number }>(
      `select day::text, quarters_due as due, energy_ac::float8 as ac, complete from site_day where site_id = $1 order by day`,
      [clinic.id],
    );
    for (const { day, due, ac, complete } of site.rows) {
      expect([day, due, complete]).toEqual([day, 4 * (HOURS.get(day) ?? 0), 1]);
      const right = clinic.inverters.size * hourly(day, (t) => 100 * level(t));
      expect([day, near(ac, right)]).toEqual([day, true]);
    }
    expect(site.rows.map((r) => r.day)).toEqual([...HOURS.keys()]);
    const logger = await arrive(clinic);
    await reportClinic(logger, CALLED_TWO);
    await logger.end();
    await rollUpDirty();
    expect(await days()).toEqual(first);
  });

  it('each night is judged once, after its own sunset', async () => {
    const judged: string[] = [];
    for (const { fromS, toS } of SPANS)
      for (let t = fromS; t <= toS; t += 1800) {
        const now = new Date(t * 1000);
        await setRollupWatermark(database('ingest'), now);
        for (const due of await nightsDue(now)) {
          await judgeNight(due.siteId, due.day, now);
          if (due.siteId === clinic.id && SPRING.concat(AUTUMN).includes(due.day)) judged.push(due.day);
        }
      }
    expect(judged).toEqual([...SPRING, ...AUTUMN]);
    const { rows } = await db.owner.query<{ day: string; n: number }>(
      `select day::text, count(*)::int as n from output_day o join string s on s.id = o.string_id
       where s.site_id = $1 and s.name = $2 and day = any ($3::date[]) group by day order by day`,
      [clinic.id, [...clinic.strings.keys()][0], [...HOURS.keys()]],
    );
    expect(rows).toEqual([...HOURS.keys()].map((day) => ({ day, n: 1 })));
  });

  it('the year and the months have each day once, with what it made', async () => {
    const read = (key: string) =>
      asActor(analyst, (tx) => siteFigures(tx, clinic.ref, key, new Date('2026-11-20T12:00Z')));
    const right = (day: string) => (clinic.inverters.size * hourly(day, (t) => 100 * level(t))) / 1000;
    const year = await read('2026');
    expect(year.days.map((d) => d.day)).toEqual([...HOURS.keys()]);
    const whole = [...HOURS.keys()].reduce((sum, day) => sum + right(day), 0);
    expect(near(year.now?.energyKWh ?? 0, whole)).toBe(true);
    for (const [key, of] of [
      ['2026-03', SPRING],
      ['2026-10', AUTUMN],
    ] as const) {
      const month = await read(key);
      expect(month.days.map((d) => [d.day, near(d.figures.energyKWh, right(d.day))])).toEqual(
        of.map((day) => [day, true]),
      );
      const lines = (await siteFiguresCsv(month).text()).split('\r\n').filter(Boolean);
      expect(new Set(lines).size).toBe(lines.length);
      for (const day of of) expect(lines.filter((l) => l.startsWith(day))).toHaveLength(1);
      const paper = (await pdfPages(await monthReportPdf(month))).join(' ').replace(/\s+/g, ' ');
      for (const day of of) expect(paper).toContain(`${day} ${Math.round(right(day))} kWh`);
    }
  });

  it('a chart of the day is 23 or 25 hours long, and of the year each day is a point', async () => {
    const at = new Date('2026-11-20T12:00Z');
    const history = (ref: string, query: Parameters<typeof readHistory>[2]) =>
      asActor(analyst, (tx) => readHistory(tx, ref, query, at));
    const [unitString] = [...clinic.strings.values()];
    for (const [on, hours] of [
      ['2026-03-29', 23],
      ['2026-10-25', 25],
    ] as const) {
      const day = await history(unitString?.ref ?? '', { range: 'day', quantity: 'current', on });
      expect(day.to - day.from).toBe(hours * 3600);
      expect(day.values.filter((v) => v !== null)).toHaveLength(12 * hours);
    }
    const inputString = gallery.plan.strings.find(
      (p) => p.inverter === gallery.plan.inverters[0]?.name && p.input === 1,
    );
    for (const [ref, kWh] of [
      [unitString?.ref, (day: string) => stringWh(day) / 1000],
      [
        gallery.strings.get(inputString?.name ?? '')?.ref,
        (day: string) => hourly(day, (t) => 40 * level(t)) / 1000,
      ],
    ] as const) {
      const year = await history(ref ?? '', { range: 'year', quantity: 'power', on: '2026-11-01' });
      const told = year.at.flatMap((t, i) =>
        year.values[i] == null ? [] : [[localDay(t), year.values[i]] as const],
      );
      expect(told.map(([day]) => day)).toEqual([...HOURS.keys()]);
      expect(told.map(([day, value]) => [day, near(value, kWh(day))])).toEqual(
        told.map(([day]) => [day, true]),
      );
    }
  });
});
