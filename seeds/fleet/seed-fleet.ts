import type { Knex } from 'knex';
import type { LoadShape } from '../../simulator/load/frames';
import { currentRoster } from '../../src/server/queries/roster';
import { writeSiteRollUps, writeStringDays } from './days';
import { writeFindings } from './findings';
import { layOutFleet, noonPlace, UNITS_A_SITE } from './plant';
import { seatsOf, writeFrames, writeNewest, writeQuarters } from './readings';

export interface FleetOptions {
  /** Sites of the first organisation; 100 units each. */
  sites: number;
  /** What the loggers' tokens are made of: the simulator's secret. */
  secret: string;
  /** Epoch s at which the fleet is laid out; it is noon at its sites then. */
  nowS: number;
  /** Of everybody in it; nobody can sign in by a password where it is not given. */
  passwordHash?: string;
  days?: number;
  quarterDays?: number;
  frameHours?: number;
  seed?: number;
}

/** What a load must be told so that its reports go on where the fleet's past ends. */
export const shapeOf = (options: Pick<FleetOptions, 'nowS' | 'seed'>): LoadShape => ({
  seed: options.seed ?? 1,
  noonHour: noonPlace(options.nowS).noonHour,
  silent: 0.02,
  stuck: 0.02,
  shutdowns: 0.02,
});

/**
 * A big fleet with a year behind it, made by COPY into a database without one: a hundred units a site, always the same
 * for the same options. Loggers are LG-FLEET-000001 and so on.
 */
export async function seedFleet(
  knex: Knex,
  options: FleetOptions,
  say: (line: string) => void = () => undefined,
): Promise<{ units: number; seconds: number }> {
  const { days = 365, quarterDays = 3, frameHours = 12, nowS } = options;
  if (await knex('organisation').first('id'))
    throw new Error('There is an organisation in this database already: a fleet needs one without any.');
  const began = performance.now();
  let since = began;
  const told = (what: string) => {
    say(`${what}: ${((performance.now() - since) / 1000).toFixed(1)} s`);
    since = performance.now();
  };
  const shape = shapeOf(options);
  const offsetS = Math.round(12 - shape.noonHour) * 3600;
  const localTodayS = Math.floor((nowS + offsetS) / 86_400) * 86_400;
  const newestS = Math.floor(nowS / 60) * 60 - 60;
  let units = 0;
  await knex.transaction(async (tx) => {
    await tx.raw('set local synchronous_commit = off');
    const strings = await layOutFleet(tx, { ...options, passwordHash: options.passwordHash ?? '!' });
    const siteIds = [...new Set(strings.map((s) => s.siteId))];
    units = siteIds.length * UNITS_A_SITE;
    told(`${siteIds.length} sites with ${units} units`);
    const seats = seatsOf(strings, shape);
    const firstS = Math.min(newestS - frameHours * 3600, newestS - quarterDays * 86_400);
    await tx.raw('select ensure_days(?::date, ?::date)', [
      new Date(firstS * 1000).toISOString(),
      new Date((nowS + 86_400) * 1000).toISOString(),
    ]);
    const dayRows = await writeStringDays(tx, seats, localTodayS, days);
    told(`${dayRows} days of strings`);
    const siteRows = await writeSiteRollUps(tx, siteIds, shape, localTodayS - offsetS, days);
    told(`${siteRows} days and quarters of sites`);
    const quarters = await writeQuarters(tx, seats, shape, newestS - quarterDays * 86_400, newestS - 900);
    told(`${quarters} quarters of strings`);
    const frames = await writeFrames(tx, seats, shape, newestS - frameHours * 3600, newestS);
    told(`${frames} frames`);
    await writeNewest(tx, seats, shape, newestS);
    await writeFindings(tx, seats, localTodayS, nowS);
    await tx.raw(
      `insert into rollup_watermark (quarter) values (date_bin('15 min', to_timestamp(?), '2000-01-01Z'))
       on conflict (only_row) do update set quarter = excluded.quarter`,
      [newestS - 900],
    );
    told('states, verdicts, causes');
  });
  const loggers = await knex('logger')
    .orderBy('id')
    .select<{ id: number; site_id: number }[]>('id', 'site_id');
  for (let i = 0; i < loggers.length; i += 2)
    await Promise.all(
      loggers.slice(i, i + 2).map((l) => currentRoster(knex, { id: l.id, siteId: l.site_id })),
    );
  told('rosters');
  const { rows } = await knex.raw<{ rows: { name: string }[] }>(
    `select format('%I', c.relname) as name from pg_class c join pg_namespace n on n.oid = c.relnamespace
     where n.nspname = 'public' and c.relkind = 'r' and not c.relispartition`,
  );
  // as autovacuum leaves a fleet that has run for a while; frames are only ever read by string and time
  await knex.raw(`vacuum analyze ${rows.map((r) => r.name).join(', ')}`);
  told('statistics');
  return { units, seconds: (performance.now() - began) / 1000 };
}
