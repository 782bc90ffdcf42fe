import type { Conditions } from '../../domain/readings/reading';
import { readingFinding, type ReadingInput, type ReadingRecord } from '../../schemas/api/readings';
import type { Tx } from '../db/transaction';

/** Meter readings. The site is one that the caller found as the actor. */

interface Row extends Omit<ReadingRecord, 'at' | 'recordedAt' | 'finding'> {
  at: Date;
  recordedAt: Date;
  findings: unknown;
  personId: number;
}
/** A record, and who made it by the database's own number. */
export type KeptReading = ReadingRecord & { personId: number };

const SELECT = `select r.ref, st.ref as "stringId", r.stage, r.reading_kind as kind, r.light, r.meter_mode as "meterMode",
    r.commanded, r.voltage, r.note, r.at, r.recorded_at as "recordedAt", r.findings, p.name as person,
    r.person_id as "personId", before.ref as supersedes
  from meter_reading r join string st on st.id = r.string_id join person p on p.id = r.person_id
  left join meter_reading before on before.id = r.supersedes`;

const kept = ({ findings, ...row }: Row): KeptReading => ({
  ...row,
  at: row.at.toISOString(),
  recordedAt: row.recordedAt.toISOString(),
  // what was stored before readings were judged has none
  finding: readingFinding.safeParse(findings).data ?? null,
});
/** A record as it leaves the server. */
export const readingOut = ({ personId: _, ...record }: KeptReading): ReadingRecord => record;

/** The newest reading of each stage and kind: the one recorded last, which nothing supersedes. */
export async function latestReadings(tx: Tx, siteId: number, stringId?: number): Promise<KeptReading[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `${SELECT} where r.id in (
       select distinct on (string_id, stage, reading_kind) id from meter_reading
       where site_id = :siteId and (cast(:stringId as int4) is null or string_id = :stringId)
       order by string_id, stage, reading_kind, id desc)
     order by r.string_id, r.id`,
    { siteId, stringId: stringId ?? null },
  );
  return rows.map(kept);
}

/** A record by its identifier, if the actor may see it. */
export async function readingByRef(tx: Tx, ref: string): Promise<KeptReading | undefined> {
  const { rows } = await tx.raw<{ rows: Row[] }>(`${SELECT} where r.ref = :ref`, { ref });
  return rows[0] && kept(rows[0]);
}

/** Writes a record; undefined where its identifier is taken, also by what the actor can't see. */
export async function insertReading(
  tx: Tx,
  record: {
    siteId: number;
    stringId: number;
    personId: number;
    input: ReadingInput;
    finding: NonNullable<ReadingRecord['finding']>;
    /** Public identifiers of the readings of other strings that were used. */
    siblings: readonly string[];
  },
): Promise<KeptReading | undefined> {
  const { input } = record;
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into meter_reading (ref, site_id, string_id, person_id, at, stage, reading_kind, light, meter_mode, commanded,
       voltage, note, findings, siblings, supersedes)
     values (:ref, :siteId, :stringId, :personId, :at, :stage, :kind, :light, :meterMode, :commanded, :voltage, :note,
       :findings, :siblings, (select id from meter_reading where ref = :supersedes))
     on conflict (ref) do nothing returning id`,
    {
      siteId: record.siteId,
      stringId: record.stringId,
      personId: record.personId,
      ref: input.ref,
      at: input.at,
      stage: input.stage,
      kind: input.kind,
      light: input.light,
      meterMode: input.meterMode,
      commanded: input.commanded,
      voltage: input.voltage,
      note: input.note,
      findings: JSON.stringify(record.finding),
      siblings: JSON.stringify(record.siblings),
      supersedes: input.supersedes,
    },
  );
  return rows[0] && readingByRef(tx, input.ref);
}

/** A sensor further away in time than this says nothing, minutes. */
const NEAR_MINUTES = 5;
/** Cell above module back by about 3 °C at 1000 W/m² (Sandia, King 2004); sensors as ordinary ones are, from experience. */
const CELL_ABOVE_BACK = 3;
const SPREAD = { poaRelativeSd: 0.05, temperatureSd: 3 };
/** Under this irradiance a plane's sensor is mostly offset, W/m². */
const LEAST_POA = 20;

/** Light and cell temperature in a string's plane around `at`, as its sensor had them; null without one. */
export async function conditionsAt(tx: Tx, stringId: number, at: Date): Promise<Conditions | null> {
  const { rows } = await tx.raw<{ rows: { poa: number | null; module: number | null }[] }>(
    `select w.irradiance as poa, w.temperature_module / 10.0::float8 as module
     from string s join sensor se on se.plane_id = s.plane_id and se.kind = 'poa_global'
     join weather_frame w on w.sensor_id = se.id
       and w.at between :at::timestamptz - make_interval(mins => :near) and :at::timestamptz + make_interval(mins => :near)
     where s.id = :stringId and w.irradiance is not null and w.temperature_module is not null
     order by abs(extract(epoch from w.at - :at::timestamptz)) limit 1`,
    { stringId, at, near: NEAR_MINUTES },
  );
  const near = rows[0];
  if (!near || near.poa === null || near.module === null || near.poa < LEAST_POA) return null;
  return {
    poaGlobal: near.poa,
    temperatureCell: near.module + (CELL_ABOVE_BACK * near.poa) / 1000,
    ...SPREAD,
  };
}
