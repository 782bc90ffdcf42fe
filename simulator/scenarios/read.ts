import { readFileSync } from 'node:fs';
import { z } from 'zod';
import { fault } from '../faults/kinds';
import type { FleetPlan } from '../plant/plan';
import { MODULE_TYPES, UNIT_TYPES } from './catalogue';
import { DEMO_SEED, demoFleet } from './demo';
import { layOut } from './lay-out';
import { PLACES } from './places';

/**
 * A scenario as a file of data: sites of the demo by name, or sites of its own, with faults and switches by time.
 * Times are seconds before the moment for which it is laid out.
 */
const presets = {
  faults: z
    .array(z.strictObject({ fault, sinceS: z.number().min(0), untilS: z.number().min(0).optional() }))
    .default([]),
  openInitiators: z
    .array(
      z.strictObject({
        initiator: z.string(),
        sinceS: z.number().min(0),
        by: z.string().default('initiator'),
      }),
    )
    .default([]),
};
const plane = z.strictObject({
  name: z.string(),
  surfaceTilt: z.number().min(0).max(90),
  surfaceAzimuth: z.number().min(0).lt(360),
  albedo: z.number().min(0).max(1).default(0.2),
});
const block = z.strictObject({
  name: z.string(),
  strings: z.int().min(1),
  units: z.union([z.int().min(1).max(63), z.array(z.int().min(1).max(63))]),
  plane: z.string(),
  zone: z.string(),
  gateways: z.union([z.int(), z.array(z.int()).min(1)]).default(1),
  perInput: z.int().min(1).optional(),
  transmitters: z.array(z.string()).optional(),
});
const ownSite = z.strictObject({
  name: z.string(),
  /** A place of the simulator's list. */
  place: z.string(),
  stage: z.enum(['commissioning', 'operating']).default('operating'),
  switchedOnOn: z.iso.date().nullable().default('2025-01-15'),
  reportIntervalS: z.int().min(10).max(900).default(60),
  moduleType: z.string(),
  unitType: z.string(),
  planes: z.array(plane).min(1),
  initiators: z.array(z.strictObject({ name: z.string(), place: z.string().default('') })).min(1),
  zones: z.array(z.strictObject({ name: z.string(), initiator: z.string() })).min(1),
  transmitters: z.array(z.strictObject({ name: z.string(), zone: z.string() })).default([]),
  gatewayNames: z.array(z.string()).default(['Gateway 1']),
  blocks: z.array(block).min(1),
  ...presets,
});
const scenario = z.strictObject({
  name: z.string(),
  about: z.string().default(''),
  seed: z.int().default(DEMO_SEED),
  /** Sites of the demo; their own faults stay away unless `keepFaults`. */
  demoSites: z
    .array(z.strictObject({ name: z.string(), keepFaults: z.boolean().default(false), ...presets }))
    .default([]),
  sites: z.array(ownSite).default([]),
});
export type Scenario = z.infer<typeof scenario>;

/** A scenario's fleet, laid out for `since` (epoch seconds). What does not fit is named with its place in the file. */
export function scenarioFleet(value: unknown, since: number): FleetPlan {
  const result = scenario.safeParse(value);
  if (!result.success)
    throw new Error(
      `The scenario does not fit: ${result.error.issues.map((i) => `${i.path.join('.') || 'file'}: ${i.message}`).join('; ')}`,
    );
  const { seed, demoSites, sites } = result.data;
  const fleet = demoFleet(seed, since);
  const organisations = fleet.organisations
    .map((o) => ({
      ...o,
      sites: o.sites.flatMap((site) => {
        const wanted = demoSites.find((d) => d.name === site.name);
        if (!wanted) return [];
        return [
          {
            ...site,
            faults: [...(wanted.keepFaults ? site.faults : []), ...wanted.faults],
            openInitiators: [...(wanted.keepFaults ? site.openInitiators : []), ...wanted.openInitiators],
          },
        ];
      }),
      people: o.people.map((p) => ({
        ...p,
        sites: p.sites.filter((s) => demoSites.some((d) => d.name === s)),
      })),
    }))
    .filter((o) => o.sites.length > 0);
  for (const { name } of demoSites)
    if (!organisations.some((o) => o.sites.some((s) => s.name === name)))
      throw new Error(`The scenario names the demo site "${name}", and the demo has none of that name.`);
  if (sites.length > 0)
    organisations.push({
      name: result.data.name,
      timeZone: 'UTC',
      phone: '',
      people: [],
      moduleTypes: MODULE_TYPES,
      unitTypes: UNIT_TYPES,
      sites: sites.map(({ place, transmitters, blocks, ...site }) => {
        const found = PLACES.find((p) => p.place === place);
        if (!found)
          throw new Error(`The scenario puts "${site.name}" at "${place}", which is no known place.`);
        return layOut(
          {
            ...site,
            transmitters,
            blocks: blocks.map((b) => ({ ...b })),
            shutdownSwitchPlace: '',
            contactName: '',
            contactPhone: '',
          },
          found,
          { modules: MODULE_TYPES, units: UNIT_TYPES },
        );
      }),
    });
  return { seed, since, organisations };
}

export function readScenario(file: string, since: number): FleetPlan {
  let value: unknown;
  try {
    value = JSON.parse(readFileSync(file, 'utf8'));
  } catch (error) {
    throw new Error(
      `The scenario file ${file} can’t be read: ${error instanceof Error ? error.message : ''}`,
    );
  }
  return scenarioFleet(value, since);
}
