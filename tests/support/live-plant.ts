import { randomUUID } from 'node:crypto';
import type pg from 'pg';
import type { SeededSite } from '../../seeds/plant/seeded';
import { frameOf, inputRows, inverterRows, radioOf } from '../../simulator/logger/readings';
import type { SitePlant } from '../../simulator/plant/site-plant';
import type { Actor } from '../../src/domain/access/permissions';
import { caseKindOf } from '../../src/domain/cases/cases';
import { database } from '../../src/server/db/pools';
import { asActor } from '../../src/server/db/transaction';
import { SiteJudge } from '../../src/server/ingest/judge-site';
import { JudgeWriter } from '../../src/server/ingest/judge-writer';
import { judgeSiteCauses } from '../../src/server/jobs/judge-causes';
import { writeFrames } from '../../src/server/queries/ingest-frames';
import { learnGateways, writeInputs, writeInverters } from '../../src/server/queries/ingest-reports';
import { judgedSite } from '../../src/server/queries/judgement-contexts';
import { casePage } from '../../src/server/services/cases';
import { changeCase } from '../../src/server/services/change-case';
import { openCase } from '../../src/server/services/open-case';
import { build, DAY_S, type DrawnPlant } from '../bench/diagnosis/plants';
import type { TestDatabase } from './database';
import { ingestClient, seedDrawn } from './pipeline';

/** A cause as a scenario looks at it. */
export interface OpenCause {
  id: number;
  ref: string;
  kind: string;
  headline: string;
  part: string | null;
  units: number;
  key: string;
  /** Wh so far. */
  loss: number;
  strings: string[];
  places: { string: string; position: number | null }[];
}

/** An analyst of the drawn plants. */
export async function analystOf(db: TestDatabase): Promise<Actor> {
  const { rows } = await db.owner.query<{ id: number; org: number }>(
    `select id, organisation_id as org from person where email = 'analyst@tollbar.example'`,
  );
  const [row] = rows;
  if (!row) throw new Error('the drawn plants have no analyst');
  return { personId: row.id, organisationId: row.org, role: 'analyst', sites: 'all' };
}

/** The open causes of everything, gravest kind first. */
export async function openCauses(db: TestDatabase): Promise<OpenCause[]> {
  const { rows } = await db.owner.query<OpenCause>(
    `select id, ref, kind, headline, shared_part ->> 'kind' || ' ' || (shared_part ->> 'name') as part,
       jsonb_array_length(units) as units, key, loss_wh as loss,
       array(select distinct u ->> 'stringId' from jsonb_array_elements(units) u) as strings,
       (select jsonb_agg(jsonb_build_object('string', u ->> 'stringId', 'position', (u ->> 'position')::int))
        from jsonb_array_elements(units) u) as places
     from cause where closed_at is null order by kind, id`,
  );
  return rows;
}

/** What happened to causes after an event: "opened stuck". */
export async function causeLines(db: TestDatabase, sinceId: number): Promise<string[]> {
  const { rows } = await db.owner.query<{ line: string }>(
    `select replace(kind, 'cause_', '') || ' ' || (detail ->> 'kind') as line from event
     where kind like 'cause%' and id > $1 order by id`,
    [sinceId],
  );
  return rows.map((r) => r.line);
}

export async function newestEvent(db: TestDatabase): Promise<number> {
  const { rows } = await db.owner.query<{ id: number }>('select coalesce(max(id), 0) as id from event');
  return rows[0]?.id ?? 0;
}

/** Opens a case from a cause, as its page does. @returns the case's reference */
export async function caseOf(actor: Actor, siteRef: string, cause: OpenCause, at: Date): Promise<string> {
  const made = await asActor(actor, (tx) =>
    openCase(
      tx,
      actor,
      {
        ref: randomUUID(),
        site: siteRef,
        origin: 'cause',
        cause: cause.ref,
        title: cause.headline,
        what: '',
        kind: caseKindOf(cause.kind),
        strings: cause.strings,
        parts: cause.places,
        address: null,
      },
      at,
    ),
  );
  return made.id;
}

export const readCase = (actor: Actor, ref: string, at: Date) =>
  asActor(actor, (tx) => casePage(tx, actor, ref, at)).then((page) => page.case);

export async function closeCase(actor: Actor, ref: string, note: string, at: Date): Promise<void> {
  const { version } = await readCase(actor, ref, at);
  await asActor(actor, (tx) =>
    changeCase(tx, actor, ref, { act: 'state', version, state: 'done', note }, at, null),
  );
}

/**
 * A plant of the simulator, minute by minute by a clock of its own: what it reports is written as ingest writes it,
 * judged, and made causes of. The drawn day is put to yesterday by whole days, so that noon stays noon.
 */
export class LivePlant {
  site!: SeededSite;
  plant!: SitePlant;
  /** The plant's own time, epoch s. */
  atS: number;
  /** Nothing comes through while it is false: the logger's way out is cut. */
  uplink = true;
  private judge!: SiteJudge;
  private client!: pg.Client;
  private readonly writer = new JudgeWriter({ lost: () => undefined, heard: () => undefined });
  private readonly shiftS: number;
  /** The noon of its first day, epoch s of the plant. */
  readonly noonS: number;

  constructor(
    private readonly db: TestDatabase,
    private readonly drawn: DrawnPlant,
  ) {
    this.noonS = drawn.fromS + DAY_S / 2;
    this.atS = this.noonS;
    this.shiftS = Math.floor((Date.now() / 1000 - DAY_S - drawn.fromS) / DAY_S) * DAY_S;
  }

  /** The plant's time as the database has it. */
  date(atS = this.atS): Date {
    return new Date((atS + this.shiftS) * 1000);
  }

  /** Seeds the site, lets the plant wake, and reports until noon and some minutes. */
  async start(): Promise<void> {
    const { db, drawn, noonS } = this;
    [this.site] = (await seedDrawn(db, [drawn.plan], this.date(noonS - 90 * DAY_S).getTime() / 1000)) as [
      SeededSite,
    ];
    await db.owner.query(`update site set stage = 'operating'`);
    await db.owner.query('select ensure_days($1::date, $2::date)', [
      this.date(noonS - DAY_S),
      this.date(noonS + 2 * DAY_S),
    ]);
    await db.owner.query(
      `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at)
       select $1, u.serial, u.id, (select min(id) from logger where site_id = $1), 1, $2, $2
       from placement p join unit u on u.id = p.unit_id where p.site_id = $1 on conflict do nothing`,
      [this.site.id, this.date(noonS - 80 * DAY_S)],
    );
    for (const zone of this.site.zones.keys()) await this.say(zone, 'released', noonS - 7200);
    this.client = await ingestClient(db);
    this.plant = build(drawn, [], noonS - 7200);
    for (let s = noonS - 7200; s < noonS; s += 60) this.plant.step(s);
    this.judge = new SiteJudge(await this.judged(), [], this.date(noonS).getTime() / 1000);
    await this.minutes(6);
  }

  async stop(): Promise<void> {
    await this.writer.stop();
    await this.client.end();
  }

  private async judged() {
    const found = await judgedSite(database('ingest'), this.site.id);
    if (!found) throw new Error('the site is not judged');
    return found;
  }

  private async say(zone: string, inForce: string, since: number): Promise<void> {
    await this.db.owner.query(
      `insert into command (site_id, zone_id, in_force, since, said_by) values ($1, $2, $3, $4, 'Initiator')`,
      [this.site.id, this.site.zones.get(zone), inForce, this.date(since)],
    );
    await this.db.owner.query(
      `insert into command (site_id, transmitter_id, in_force, since, said_by)
       select $1, id, $3, $4, 'Initiator' from transmitter where zone_id = $2`,
      [this.site.id, this.site.zones.get(zone), inForce, this.date(since)],
    );
  }

  /** The logger says what is in force in a zone from now on. */
  async command(zone: string, inForce: 'initiator' | 'keep_alive_lost' | 'released'): Promise<void> {
    await this.say(zone, inForce, this.atS);
    this.judge.setSite(await this.judged(), this.date().getTime() / 1000);
  }

  /** Somebody presses the initiator of a zone, or releases it. */
  async press(zone: string, isOpen: boolean): Promise<void> {
    const initiator = this.drawn.plan.zones.find((z) => z.name === zone)?.initiator ?? '';
    this.plant.commands.setInitiator(initiator, isOpen, this.atS);
    await this.command(zone, isOpen ? 'initiator' : 'released');
  }

  /** What the air at the site is said to be, °C: snow may lie where it freezes. */
  air(temperatureAir: number): void {
    this.judge.takeAir(temperatureAir, this.date().getTime() / 1000);
  }

  /** The plant goes on until `hours` after the noon of its first day, and nobody reports meanwhile. */
  sleepUntil(hours: number): void {
    const untilS = this.noonS + hours * 3600;
    for (; this.atS + 300 < untilS; this.atS += 300) this.plant.step(this.atS + 300);
  }

  /** The plant goes on for so many minutes; each minute is written, judged, and causes are looked for. */
  async minutes(n: number): Promise<void> {
    for (let k = 0; k < n; k++) {
      this.atS += 60;
      this.plant.step(this.atS);
      await this.report(this.date().getTime() / 1000);
      await judgeSiteCauses(this.site.id, this.date());
    }
  }

  private async report(at: number): Promise<void> {
    const { plan } = this.drawn;
    const { site, judge, client } = this;
    const logger = plan.loggers[0]!.serial;
    const rows = this.uplink ? this.framesAt(at, logger) : [];
    if (this.uplink) {
      await writeFrames(client, rows, new Date(0));
      const heard = [...new Set(rows.flatMap((r) => r.via.flatMap((v) => (v === null ? [] : [v]))))];
      const loggerId = site.loggers.get(logger)!;
      await learnGateways(
        client,
        heard.map((number) => ({ siteId: site.id, loggerId, number, heardAt: at })),
      );
      await writeInputs(
        client,
        inputRows(this.plant, logger).map((r) => ({
          inputId: site.inputs.get(`${r.inverter}/${r.input}`)!,
          siteId: site.id,
          at,
          voltage: r.voltage,
          current: r.current,
        })),
      );
      await writeInverters(
        client,
        inverterRows(this.plant, logger).map(({ inverter, ...r }) => ({
          ...r,
          inverterId: site.inverters.get(inverter)!,
          siteId: site.id,
          at,
        })),
      );
    }
    await this.db.owner.query(
      this.uplink
        ? `update logger set connected_at = $1, last_spoke_at = $1`
        : `update logger set connected_at = null where $1::timestamptz is not null`,
      [this.date()],
    );
    const outcomes = rows.flatMap((r) => {
      const outcome = this.judge.frame(r.stringId, {
        atS: at,
        state: r.state,
        voltageOut: r.voltage,
        voltageIn: r.voltageIn ?? undefined,
      });
      return outcome ? [{ site: judge, outcome }] : [];
    });
    await this.conclude(at, outcomes);
  }

  private async conclude(at: number, outcomes: Parameters<JudgeWriter['write']>[0][number][]): Promise<void> {
    const { judge } = this;
    for (const judged of judge.strings.values()) {
      const outcome = judge.sweep(judged, at);
      if (outcome) outcomes.push({ site: judge, outcome });
    }
    await this.writer.write(outcomes);
    this.writer.checkpoint(judge, true);
    await this.writer.flush();
  }

  /** So many hours go by without a report; `each` is called every few of them, as the jobs would run. */
  async silence(hours: number, everyHours: number, each: (at: Date) => Promise<void>): Promise<void> {
    for (let h = 0; h < hours; h += everyHours) {
      for (let k = 0; k < everyHours; k++) this.plant.step((this.atS += 3600));
      await this.conclude(this.date().getTime() / 1000, []);
      await judgeSiteCauses(this.site.id, this.date());
      await each(this.date());
    }
  }

  private framesAt(at: number, logger: string) {
    const radio = radioOf(this.plant, logger);
    return this.drawn.plan.strings.flatMap((s) => {
      const serials = s.slots.map((slot) => slot.serial);
      const frame = frameOf(this.plant, radio, serials);
      if (!frame) return [];
      const empty = s.slots.map(() => null);
      return [
        {
          stringId: this.site.strings.get(s.name)!.id,
          siteId: this.site.id,
          at,
          voltage: frame.voltageOut ?? empty,
          voltageIn: frame.voltageIn ?? null,
          current: frame.current ?? empty,
          power: frame.powerOut ?? null,
          temperature: frame.temperature ?? empty,
          signal: frame.signal ?? empty,
          via: frame.via,
          state: frame.state,
        },
      ];
    });
  }
}
