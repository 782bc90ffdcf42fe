import { z } from 'zod';
import { TOKEN_SCOPES } from '../../../domain/access/scopes';
import { ROLES } from '../../../domain/access/permissions';
import { UNIT_KINDS } from '../../../domain/equipment/unit-type';
import { EVENT_KINDS, STRING_FINDINGS, UNIT_STATES, VERDICTS } from '../../../domain/verdicts/codes';
import { commandNow, counts } from '../now';
import { time, uuid } from './common';

/** The things of /api/v1 as other programs get them. Additions are fine; nothing is renamed or taken away. */

const named = z.object({ id: uuid, name: z.string() });

export const me = z
  .object({
    person: z.object({ id: uuid, name: z.string(), role: z.enum(ROLES) }),
    organisation: z.object({ id: uuid, name: z.string(), timeZone: z.string() }),
    token: z.object({
      name: z.string(),
      scopes: z.array(z.enum(TOKEN_SCOPES)),
      sites: z.array(uuid).nullable().meta({ description: 'null: every site that the person sees' }),
      expiresAt: time,
    }),
  })
  .meta({ id: 'Me' });

export const site = z
  .object({
    id: uuid,
    name: z.string(),
    place: z.string(),
    latitude: z.number().meta({ description: 'degrees' }),
    longitude: z.number().meta({ description: 'degrees' }),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
    ruleSet: z.string().meta({ description: 'Which rules of rapid shutdown it is judged by' }),
    switchedOnOn: z.iso.date().nullable(),
    strings: z.int(),
    counts: counts.meta({ description: 'Units by state and verdict, as judged last' }),
    power: z.number().nullable().meta({ description: 'W, AC, of all inverters now; null: nothing fresh' }),
    acPowerMax: z.number().meta({ description: 'W' }),
    reportedAt: time.nullable(),
    inShutdownSince: time.nullable().meta({ description: 'Since when every zone is in shutdown on purpose' }),
    commands: z.array(commandNow).meta({ description: 'What is in force other than released' }),
    performanceRatio30d: z
      .number()
      .nullable()
      .meta({ description: '0 to 1, where plane irradiance is measured' }),
  })
  .meta({ id: 'Site' });

export const string = z
  .object({
    id: uuid,
    name: z.string(),
    site: named,
    kind: z.enum(UNIT_KINDS),
    slots: z.int(),
    unitType: z.string(),
    plane: z.object({
      name: z.string(),
      surfaceTilt: z.number().meta({ description: 'degrees' }),
      surfaceAzimuth: z.number().meta({ description: 'degrees clockwise from north' }),
    }),
    inverter: z.string(),
    input: z.int(),
    zone: z.string(),
    logger: z.string().nullable().meta({ description: 'Serial' }),
    reportedAt: time.nullable(),
    voltage: z.number().nullable().meta({ description: 'V over its units in the newest report' }),
    power: z.number().nullable().meta({ description: 'W of its units in the newest report' }),
  })
  .meta({ id: 'String' });

export const unit = z
  .object({
    site: named,
    string: named,
    position: z.int().meta({ description: '1 is at the negative end' }),
    serial: z.string().nullable().meta({ description: 'null: the slot is empty' }),
    placedFrom: time.nullable(),
    roofPlace: z.string(),
    state: z.enum(UNIT_STATES).nullable().meta({
      description:
        'The unit’s own claim as last judged; null: nothing to say of it. A claim proves nothing about voltage',
    }),
    verdict: z.enum(VERDICTS).nullable(),
    since: time.nullable(),
    seen: time.nullable().meta({ description: 'When it last reported' }),
    voltage: z.number().nullable().meta({ description: 'V, output' }),
    voltageIn: z.number().nullable().meta({ description: 'V, module side' }),
    current: z.number().nullable().meta({ description: 'A' }),
    power: z.number().nullable().meta({ description: 'W' }),
    temperature: z.number().nullable().meta({ description: '°C' }),
    signal: z.number().nullable().meta({ description: 'dBm' }),
    gateway: z.string().nullable(),
    assumed: z.boolean().meta({ description: 'The output is inferred from the claim, not measured' }),
  })
  .meta({ id: 'Unit' });

export const verdictNow = z
  .object({
    site: named,
    string: named,
    position: z.int().nullable().meta({ description: 'null: it is of the string, position unknown' }),
    serial: z.string().nullable(),
    state: z.enum(UNIT_STATES).nullable(),
    verdict: z.enum(VERDICTS).nullable().meta({ description: 'null: see finding' }),
    finding: z
      .enum(STRING_FINDINGS)
      .nullable()
      .meta({ description: 'What the string as a whole is found to be' }),
    words: z.string().nullable(),
    since: time.nullable(),
  })
  .meta({ id: 'Verdict' });

export const placement = z
  .object({
    serial: z.string(),
    unitType: z.string(),
    site: named,
    string: named,
    position: z.int(),
    placedFrom: time,
    placedTo: time.nullable().meta({ description: 'null: it is there now' }),
  })
  .meta({ id: 'Placement' });

export const event = z
  .object({
    id: z.string(),
    at: time.meta({ description: 'When it happened' }),
    recordedAt: time,
    kind: z.enum(EVENT_KINDS),
    site: named,
    string: named.nullable(),
    detail: z.record(z.string(), z.unknown()).meta({ description: 'What belongs to its kind' }),
  })
  .meta({ id: 'Event' });

export const rollCall = z
  .object({
    id: uuid,
    site: named,
    startedAt: time,
    startedBy: z.string(),
    personOnSite: z.string(),
    stoppedAt: time.nullable(),
    stoppedBy: z.string().nullable(),
    heard: z.int().meta({ description: 'Serials that answered for the first time in it' }),
  })
  .meta({ id: 'RollCall' });

export const shutdownTest = z
  .object({
    id: uuid,
    site: named,
    zone: z.string().nullable(),
    at: time,
    madeBy: z.string(),
    result: z.enum(['passed', 'failed', 'consistent', 'not_witnessed']).meta({
      description: 'A pass needs a rated meter; telemetry alone says consistent or not_witnessed',
    }),
    signed: z.boolean(),
    inForce: z.boolean().meta({ description: 'No newer test has taken its place' }),
    strings: z.array(z.object({ id: uuid, name: z.string(), result: z.string() })),
  })
  .meta({ id: 'ShutdownTest' });

export const logger = z
  .object({
    id: uuid,
    site: named,
    serial: z.string(),
    firmware: z.string().nullable(),
    connected: z.boolean(),
    lastSpokeAt: time.nullable(),
    refused: z.int().meta({ description: 'Messages that were refused, ever' }),
  })
  .meta({ id: 'Logger' });
