import { z } from 'zod';
import { STEPS } from '../../../domain/commissioning/steps';

/** What a pack says: the shape that is fingerprinted and kept. Names as the people of the site know them; SI units. */

const time = z.string();
const names = z.array(z.string());
const figure = z.union([z.number(), z.string()]);

export const packData = z.object({
  site: z.object({
    id: z.string(),
    name: z.string(),
    place: z.string(),
    latitude: z.number(),
    longitude: z.number(),
    altitude: z.number(),
    timeZone: z.string(),
    ruleSet: z.string(),
    structure: z.string(),
    temperatureMin: z.number().nullable(),
    temperatureMax: z.number().nullable(),
    switchPlace: z.string(),
    contactName: z.string(),
    contactPhone: z.string(),
    createdAt: time,
    switchedOnOn: z.string().nullable(),
    outline: z.array(z.tuple([z.number(), z.number()])).nullable(),
    organisation: z.object({ name: z.string(), phone: z.string().nullable() }),
  }),
  planes: z.array(z.object({ name: z.string(), tilt: z.number(), azimuth: z.number() })),
  inverters: z.array(
    z.object({
      name: z.string(),
      type: z.string().nullable(),
      acPowerMax: z.number(),
      inputs: z.array(z.object({ number: z.number(), strings: names })),
    }),
  ),
  zones: z.array(
    z.object({
      name: z.string(),
      initiator: z.string(),
      place: z.string(),
      strings: names,
      transmitters: z.array(z.object({ name: z.string(), strings: names })),
    }),
  ),
  loggers: z.array(z.object({ serial: z.string(), firmware: z.string().nullable(), gateways: names })),
  strings: z.array(
    z.object({
      id: z.string(),
      name: z.string(),
      plane: z.string(),
      kind: z.string(),
      unitType: z.string(),
      inverter: z.string(),
      input: z.number(),
      zone: z.string(),
      logger: z.string().nullable(),
      leavesArray: z.boolean(),
      cableResistance: z.number(),
      transmitters: names,
      slots: z.array(
        z.object({
          position: z.number(),
          serial: z.string().nullable(),
          moduleType: z.string(),
          place: z.string(),
          x: z.number().nullable(),
          y: z.number().nullable(),
        }),
      ),
    }),
  ),
  moduleTypes: z.array(
    z.looseObject({
      name: z.string(),
      voc_ref: z.number(),
      vmp_ref: z.number(),
      isc_ref: z.number(),
      imp_ref: z.number(),
      beta_voc: z.number(),
      gamma_pmp: z.number(),
      cells_in_series: z.number(),
      voltage_system_max: z.number(),
    }),
  ),
  unitTypes: z.array(
    z.looseObject({
      name: z.string(),
      kind: z.string(),
      out_of_box: z.string(),
      released_by: z.string(),
      on_command_loss: z.string(),
      command_loss_after_s: z.number(),
      shutdown_voltage_nominal: z.number(),
      shutdown_voltage_min: z.number(),
      shutdown_voltage_max: z.number(),
      measures: z.string(),
      voltage_in_max: z.number(),
      current_max: z.number(),
      voltage_system_max: z.number(),
      insulation_test_max: z.number().nullable(),
    }),
  ),
  inverterTypes: z.array(
    z.looseObject({
      name: z.string(),
      ac_power_max: z.number(),
      inputs: z.number(),
      voltage_max: z.number(),
      mppt_min: z.number(),
      mppt_max: z.number(),
      current_max: z.number(),
      isc_max: z.number(),
    }),
  ),
  connectorTypes: z.array(
    z.object({
      id: z.string(),
      name: z.string(),
      maker: z.string(),
      family: z.string(),
      voltageMax: z.number(),
      currentMax: z.number(),
    }),
  ),
  checks: z.array(
    z.object({
      ref: z.string(),
      string: z.string(),
      check: z.string(),
      result: z.string(),
      reason: z.string(),
      note: z.string(),
      figures: z.record(z.string(), figure),
      person: z.string(),
      at: time,
    }),
  ),
  signOffs: z.array(z.object({ string: z.string(), person: z.string(), at: time, stale: z.boolean() })),
  readings: z.array(
    z.object({
      ref: z.string(),
      string: z.string(),
      stage: z.string(),
      kind: z.string(),
      light: z.string(),
      voltage: z.number(),
      note: z.string(),
      finding: z
        .looseObject({
          outcome: z.string(),
          headline: z.string(),
          expectedV: z.number().nullable(),
          expectedLowV: z.number().nullable(),
          expectedHighV: z.number().nullable(),
        })
        .nullable()
        .catch(null), // stored before it was judged
      person: z.string(),
      at: time,
    }),
  ),
  rollCalls: z.array(
    z.object({
      startedAt: time,
      stoppedAt: time.nullable(),
      personOnSite: z.string(),
      startedBy: z.string(),
    }),
  ),
  heard: z.array(
    z.object({ string: z.string(), roster: z.number(), heard: z.number(), weakest: z.number().nullable() }),
  ),
  heardUnknown: names,
  tests: z.array(
    z.object({
      ref: z.string(),
      zone: z.string().nullable(),
      at: time,
      madeBy: z.string(),
      result: z.string(),
      superseded: z.boolean(),
    }),
  ),
  gaps: z.array(
    z.object({
      step: z.enum(STEPS),
      gap: z.string(),
      words: z.string(),
      reason: z.string(),
      person: z.string(),
      at: time,
    }),
  ),
  photos: z.array(
    z.object({
      ref: z.string(),
      string: z.string().nullable(),
      subject: z.string(),
      subjectRef: z.string().nullable(),
      name: z.string(),
      note: z.string(),
      person: z.string().nullable(),
      at: time,
      sha256: z.string(),
    }),
  ),
  people: z.array(z.object({ name: z.string(), role: z.string(), did: names })),
});
export type PackData = z.infer<typeof packData>;

/** A shutdown test as the papers tell it. */
export interface PackTest {
  zone: string;
  initiator: string;
  at: string;
  result: string;
  headline: string;
  signedBy: string;
  fingerprint: string;
  facts: (readonly [string, string])[];
  strings: { name: string; result: string; words: string; highestV: number | null; slowest: string }[];
}
