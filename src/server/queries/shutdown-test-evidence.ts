import { outputLimits } from '../../domain/verdicts/observe';
import type { OutputLimits, RuleSet } from '../../domain/verdicts/context';
import type { InForce } from '../../domain/verdicts/codes';
import type { UnitKind, UnitType } from '../../domain/equipment/unit-type';
import type { EvidenceTrace, TestedPart, TestFacts } from '../../domain/commissioning/shutdown-test-record';
import type { Tx } from '../db/transaction';
import { after, anyString, framesOf } from './frames';

/** The plant as a shutdown test sees it, and what loggers reported in the minutes of a test. */

/** A string with what is needed to read its reports. */
export interface WatchedString {
  dbId: number;
  inputId: number;
  limits: OutputLimits;
  part: TestedPart;
}
export interface WatchedZone {
  zoneId: number;
  transmitterIds: Map<string, number>;
  strings: WatchedString[];
  facts: TestFacts;
}

interface StringRow {
  dbId: number;
  id: string;
  name: string;
  kind: UnitKind;
  inputId: number;
  inputName: string;
  inputStrings: number;
  leaves: boolean;
  measures: UnitType['measures'];
  nominal: number;
  min: number;
  max: number;
  serials: (string | null)[];
  transmitters: string[];
}

/** Zone, initiator, strings and the transmitters that they hear. */
export async function watchedZone(tx: Tx, zoneId: number): Promise<WatchedZone | undefined> {
  const heads = await tx.raw<{
    rows: {
      siteId: number;
      site: string;
      siteName: string;
      timeZone: string;
      zone: string;
      zoneName: string;
      initiator: string;
      place: string;
      ruleSet: RuleSet;
      interval: number;
    }[];
  }>(
    `select site.id as "siteId", site.ref as site, site.name as "siteName", site.time_zone as "timeZone", z.ref as zone,
            z.name as "zoneName", i.name as initiator, i.place, site.rule_set as "ruleSet", site.report_interval_s as interval
     from zone z join site on site.id = z.site_id join initiator i on i.id = z.initiator_id where z.id = ?`,
    [zoneId],
  );
  const head = heads.rows[0];
  if (!head) return undefined;
  const strings = await tx.raw<{ rows: StringRow[] }>(
    `select s.id as "dbId", s.ref as id, s.name, s.kind, s.input_id as "inputId",
            v.name || ' input ' || n.number as "inputName",
            (select count(*)::int from string o where o.input_id = s.input_id) as "inputStrings",
            s.home_run_leaves_array as leaves, u.measures, u.shutdown_voltage_nominal as nominal,
            u.shutdown_voltage_min as min, u.shutdown_voltage_max as max,
            (select array_agg(unit.serial order by pos) from generate_series(1, s.slots) pos
               left join slot on slot.string_id = s.id and slot.position = pos
               left join placement p on p.slot_id = slot.id and p.placed_to is null
               left join unit on unit.id = p.unit_id) as serials,
            coalesce((select array_agg(t.ref order by t.name) from transmitter_string ts join transmitter t on t.id = ts.transmitter_id
                      where ts.string_id = s.id and u.released_by = 'keep_alive'), '{}') as transmitters
     from string s join input n on n.id = s.input_id join inverter v on v.id = n.inverter_id
     join unit_type u on u.id = s.unit_type_id
     where s.zone_id = ? order by s.roster_index nulls last, s.name`,
    [zoneId],
  );
  const transmitters = await tx.raw<{ rows: { dbId: number; id: string; name: string }[] }>(
    `select t.id as "dbId", t.ref as id, t.name from transmitter t
     where exists (select from transmitter_string ts join string s on s.id = ts.string_id
                     join unit_type u on u.id = s.unit_type_id and u.released_by = 'keep_alive'
                   where ts.transmitter_id = t.id and s.zone_id = ?)
     order by t.name`,
    [zoneId],
  );
  const watched = strings.rows.map((r) => watchedString(r));
  return {
    zoneId,
    transmitterIds: new Map(transmitters.rows.map((t) => [t.id, t.dbId])),
    strings: watched,
    facts: {
      site: { id: head.site, name: head.siteName, timeZone: head.timeZone },
      zone: { id: head.zone, name: head.zoneName },
      initiator: { name: head.initiator, place: head.place },
      ruleSet: head.ruleSet,
      reportIntervalS: head.interval,
      transmitters: transmitters.rows.map(({ id, name }) => ({ id, name })),
      strings: watched.map((s) => s.part),
    },
  };
}

function watchedString(r: StringRow): WatchedString {
  const limits = outputLimits({
    shutdownVoltage: { nominal: r.nominal, min: r.min, max: r.max },
    measures: r.measures,
  });
  const units = r.serials.filter((s) => s !== null).length;
  const tenth = (v: number) => Math.round(v * 10) / 10;
  return {
    dbId: r.dbId,
    inputId: r.inputId,
    limits,
    part: {
      id: r.id,
      name: r.name,
      kind: r.kind,
      serials: r.serials,
      homeRunLeavesArray: r.leaves,
      input: { name: r.inputName, strings: r.inputStrings },
      transmitters: r.transmitters,
      shutdownV: { nominal: tenth(units * r.nominal), max: tenth(units * r.max) },
      passingFromV: limits.passingFromCv / 100,
    },
  };
}

export interface Span {
  from: Date;
  to: Date;
}

export interface SaidCommand {
  zoneId: number | null;
  transmitterId: number | null;
  where: string;
  inForce: InForce;
  since: Date;
  by: string;
}

/** What came in force in a zone and at some transmitters, oldest first, and what was in force when it began. */
export async function commandsSaid(
  tx: Tx,
  zoneId: number,
  transmitterIds: readonly number[],
  span: Span,
): Promise<{ before: SaidCommand[]; during: SaidCommand[] }> {
  const { rows } = await tx.raw<{ rows: (SaidCommand & { ended: Date | null })[] }>(
    `select * from (
       select c.zone_id as "zoneId", c.transmitter_id as "transmitterId", coalesce(z.name, t.name) as where,
              c.in_force as "inForce", c.since, c.said_by as by,
              lead(c.since) over (partition by c.zone_id, c.transmitter_id order by c.since) as ended
       from command c left join zone z on z.id = c.zone_id left join transmitter t on t.id = c.transmitter_id
       where (c.zone_id = :zoneId or c.transmitter_id = any (cast(:ids as int4[]))) and c.since <= :to) x
     where since >= :from or ended is null or ended > :from order by since`,
    { zoneId, ids: [...transmitterIds], ...span },
  );
  const plain = ({ ended: _, ...c }: SaidCommand & { ended: Date | null }): SaidCommand => c;
  return {
    before: rows.filter((r) => r.since < span.from).map(plain),
    during: rows.filter((r) => r.since >= span.from).map(plain),
  };
}

export interface FrameRow {
  stringId: number;
  atS: number;
  state: (number | null)[];
  voltageOut: (number | null)[];
  voltageIn: (number | null)[] | null;
}
export async function framesIn(tx: Tx, stringIds: readonly number[], span: Span): Promise<FrameRow[]> {
  const { rows } = await tx.raw<{ rows: FrameRow[] }>(
    `select string_id as "stringId", extract(epoch from at)::float8 as "atS", state, voltage as "voltageOut",
            voltage_in as "voltageIn"
     from ${framesOf({
       columns: ['state', 'voltage', 'voltage_in'],
       strings: anyString,
       from: ':from::timestamptz',
       to: after(':to'),
     })} f order by at`,
    { ids: [...stringIds], ...span },
  );
  return rows;
}

export interface TraceRow {
  stringId: number;
  startedS: number;
  measuringPoint: EvidenceTrace['measuringPoint'];
  accuracyV: number;
  /** dV */
  voltage: (number | null)[];
  /** cV */
  unitVoltage: (number | null)[][] | null;
}
export async function tracesIn(tx: Tx, stringIds: readonly number[], span: Span): Promise<TraceRow[]> {
  const { rows } = await tx.raw<{ rows: TraceRow[] }>(
    `select string_id as "stringId", extract(epoch from started_at)::float8 as "startedS", measuring_point as "measuringPoint",
            accuracy as "accuracyV", voltage, unit_voltage as "unitVoltage"
     from trace where string_id = any (cast(:ids as int4[])) and started_at between :from and :to
     order by started_at, string_id, measuring_point`,
    { ids: [...stringIds], ...span },
  );
  return rows;
}

export interface InputRow {
  inputId: number;
  atS: number;
  voltageV: number;
  currentA: number | null;
}
export async function inputsIn(tx: Tx, inputIds: readonly number[], span: Span): Promise<InputRow[]> {
  const { rows } = await tx.raw<{ rows: InputRow[] }>(
    `select input_id as "inputId", extract(epoch from at)::float8 as "atS", voltage / 10.0::float8 as "voltageV",
            current / 100.0::float8 as "currentA"
     from input_frame where input_id = any (cast(:ids as int4[])) and voltage is not null and at between :from and :to
     order by at`,
    { ids: [...inputIds], ...span },
  );
  return rows;
}

/** When the newest frame of these strings and the newest report of these inputs came; null: never. */
export async function newestReports(
  tx: Tx,
  stringIds: readonly number[],
  inputIds: readonly number[],
): Promise<{
  frames: Date | null;
  inputs: Date | null;
  loggers: { serial: string; spokeAt: Date | null }[];
}> {
  const { rows } = await tx.raw<{ rows: { frames: Date | null; inputs: Date | null }[] }>(
    `select (select max(at) from string_state where string_id = any (cast(:strings as int4[]))) as frames,
            (select max(at) from input_state where input_id = any (cast(:inputs as int4[]))) as inputs`,
    { strings: [...stringIds], inputs: [...inputIds] },
  );
  const loggers = await tx.raw<{ rows: { serial: string; spokeAt: Date | null }[] }>(
    `select l.serial, l.last_spoke_at as "spokeAt" from logger l
     where exists (select from string s where s.logger_id = l.id and s.id = any (?::int4[])) order by l.serial`,
    [[...stringIds]],
  );
  return { frames: rows[0]?.frames ?? null, inputs: rows[0]?.inputs ?? null, loggers: loggers.rows };
}

/** Units of these strings that pass until they have answered the roll call, and how many of them have not. */
export async function unheardUnits(
  tx: Tx,
  stringIds: readonly number[],
): Promise<{ unheard: number; units: number }> {
  const { rows } = await tx.raw<{ rows: { unheard: number; units: number }[] }>(
    `select count(p.id)::int as units, count(p.id) filter (where not exists (
              select from heard h where h.unit_id = p.unit_id and h.site_id = s.site_id))::int as unheard
     from string s join unit_type u on u.id = s.unit_type_id
     join slot on slot.string_id = s.id join placement p on p.slot_id = slot.id and p.placed_to is null
     where s.id = any (?::int4[]) and s.kind <> 'shutdown_only' and u.out_of_box = 'passing'`,
    [[...stringIds]],
  );
  return rows[0] ?? { unheard: 0, units: 0 };
}

/** The number of a zone of a site by its public identifier. */
export async function zoneOf(
  tx: Tx,
  siteId: number,
  ref: string,
): Promise<{ id: number; name: string } | undefined> {
  return tx('zone').where({ site_id: siteId, ref }).first('id', 'name');
}
