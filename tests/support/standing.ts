import type pg from 'pg';
import { codeOf, UNIT_STATES, VERDICTS, type UnitState, type Verdict } from '../../src/domain/verdicts/codes';
import type { SeededSite } from '../../seeds/plant/seeded';

/** How one unit stands, for a scene; what is left out is passing, ok, and reported a moment ago. */
export interface Standing {
  state?: UnitState;
  verdict?: Verdict;
  /** Since when; default: an hour before `at`. */
  since?: Date;
  via?: number;
}

const seconds = (at: Date): number => Math.floor(at.getTime() / 1000);

/**
 * Writes what ingest and judgement would have concluded of a site as of `at`: every unit as `of` says, the logger
 * connected, its gateways heard. Shutdown-only strings tell nothing and get no row.
 */
export async function stand(
  owner: pg.Pool,
  site: SeededSite,
  at: Date,
  of: (string: string, position: number) => Standing | null = () => null,
): Promise<void> {
  const hour = new Date(at.getTime() - 3_600_000);
  for (const plan of site.plan.strings) {
    const string = site.strings.get(plan.name);
    if (!string || plan.kind === 'shutdown_only') continue;
    const units = plan.slots.map((slot, i) => ({ gateway: slot.gateway, ...of(plan.name, i + 1) }));
    const states = units.map((u) => u.state ?? 'passing');
    const verdicts = units.map((u) => u.verdict ?? 'ok');
    const count = (test: (i: number) => boolean) => units.filter((_, i) => test(i)).length;
    const state = (word: UnitState) => count((i) => states[i] === word);
    const verdict = (word: Verdict) => count((i) => verdicts[i] === word);
    const mask = units.reduce((m, _, i) => m | (1n << BigInt(i)), 0n);
    await owner.query(
      `insert into string_judgement (string_id, site_id, frame_at, judged_at, state, verdict, since, passing, shutdown,
                                     unheard, silent, dark, stuck, not_shutting_down, unconfirmed)
       values ($1, $2, $3, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14)
       on conflict (string_id) do update set state = excluded.state, verdict = excluded.verdict, since = excluded.since,
         passing = excluded.passing, shutdown = excluded.shutdown, unheard = excluded.unheard, silent = excluded.silent,
         dark = excluded.dark, stuck = excluded.stuck, not_shutting_down = excluded.not_shutting_down,
         unconfirmed = excluded.unconfirmed, finding = null, finding_since = null, evidence = null`,
      [
        string.id,
        site.id,
        at,
        states.map((s) => codeOf(UNIT_STATES, s)),
        verdicts.map((v) => codeOf(VERDICTS, v)),
        units.map((u) => seconds(u.since ?? hour)),
        state('passing'),
        state('shutdown'),
        state('unheard'),
        state('silent'),
        state('dark'),
        verdict('stuck'),
        verdict('not_shutting_down'),
        verdict('unconfirmed'),
      ],
    );
    await owner.query(
      `insert into string_state (string_id, site_id, at, mask, voltage_sum, power_sum, voltage, current, temperature,
                                 signal, via, state, seen)
       values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13)
       on conflict (string_id) do update set via = excluded.via, seen = excluded.seen, state = excluded.state,
         voltage = excluded.voltage, current = excluded.current, at = excluded.at`,
      [
        string.id,
        site.id,
        at,
        mask.toString(),
        states.filter((s) => s === 'passing').length * 3600,
        states.filter((s) => s === 'passing').length * 2700,
        states.map((s) => (s === 'passing' ? 3600 : s === 'shutdown' ? 60 : null)),
        states.map((s) => (s === 'passing' ? 7500 : null)),
        states.map(() => 400),
        states.map((s, i) => (s === 'silent' || s === 'unheard' ? null : -60 - i)),
        units.map((u) => u.via ?? u.gateway),
        states.map((s) => (s === 'passing' ? 1 : s === 'shutdown' ? 2 : 0)),
        states.map((s) => (s === 'unheard' ? 0 : seconds(s === 'silent' ? hour : at))),
      ],
    );
  }
  await owner.query(`update logger set connected_at = $2, last_spoke_at = $2 where site_id = $1`, [
    site.id,
    at,
  ]);
  await owner.query(`update gateway set last_heard_at = $2 where site_id = $1`, [site.id, at]);
}

/** What came in force in a zone. */
export async function command(
  owner: pg.Pool,
  site: SeededSite,
  zone: string,
  inForce: 'initiator' | 'keep_alive_lost' | 'power_lost' | 'released',
  since: Date,
  saidBy = 'Main initiator',
): Promise<void> {
  await owner.query(
    `insert into command (site_id, zone_id, in_force, since, said_by) values ($1, $2, $3, $4, $5)`,
    [site.id, site.zones.get(zone), inForce, since, saidBy],
  );
}
