import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import type { SitePlan } from '../../simulator/plant/plan';
import { loggerToken } from '../../simulator/scenarios/tokens';
import { insertRows, known } from './rows';

/** Loggers with their tokens (hashes only), gateways and sensors. */
export async function seedLoggers(
  db: Knex,
  plan: SitePlan,
  siteId: number,
  planes: Map<string, number>,
  secret: string,
): Promise<{ loggers: Map<string, number>; sensors: Map<string, number> }> {
  const rows = await insertRows<{ id: number; serial: string }>(
    db,
    'logger',
    { site_id: 'int4', serial: 'text', firmware: 'text' },
    plan.loggers.map((l) => ({ site_id: siteId, serial: l.serial, firmware: l.firmware })),
    ['id', 'serial'],
  );
  const loggers = new Map(rows.map((r) => [r.serial, r.id]));
  await insertRows(
    db,
    'ingest_token',
    { logger_id: 'int4', hash: 'bytea' },
    plan.loggers.map((l) => ({
      logger_id: known(loggers, l.serial, 'the logger'),
      hash: `\\x${createHash('sha256').update(loggerToken(secret, l.serial)).digest('hex')}`,
    })),
  );
  await insertRows(
    db,
    'gateway',
    { site_id: 'int4', logger_id: 'int4', number: 'int2', name: 'text' },
    plan.loggers.flatMap((l) =>
      l.gateways.map((g) => ({
        site_id: siteId,
        logger_id: known(loggers, l.serial, 'the logger'),
        number: g.number,
        name: g.name,
      })),
    ),
  );
  const sensors = await insertRows<{ id: number; logger_id: number; number: number }>(
    db,
    'sensor',
    { site_id: 'int4', logger_id: 'int4', plane_id: 'int4', number: 'int2', kind: 'text' },
    plan.loggers.flatMap((l) =>
      l.sensors.map((s) => ({
        site_id: siteId,
        logger_id: known(loggers, l.serial, 'the logger'),
        plane_id: s.plane === null ? null : known(planes, s.plane, 'the plane'),
        number: s.number,
        kind: s.kind,
      })),
    ),
    ['id', 'logger_id', 'number'],
  );
  const serialOf = new Map(rows.map((r) => [r.id, r.serial]));
  return {
    loggers,
    sensors: new Map(sensors.map((s) => [`${serialOf.get(s.logger_id) ?? ''}/${s.number}`, s.id])),
  };
}
