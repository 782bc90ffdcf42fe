import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { z } from 'zod';
import { fault } from './faults/kinds';
import type { SiteRun } from './site-run';

/** What people did to the plant, kept between starts: switches, faults, which units have been heard, counters. */
const keptSite = z.object({
  initiators: z.record(z.string(), z.object({ open: z.boolean(), since: z.number(), by: z.string() })),
  faults: z.array(z.object({ id: z.string(), fault, fromS: z.number(), toS: z.number().nullable() })),
  heard: z.array(z.string()),
  energy: z.record(z.string(), z.number()),
});
const kept = z.object({ since: z.number(), seed: z.number(), sites: z.record(z.string(), keptSite) });
export type KeptState = z.infer<typeof kept>;

/** The state in a file; null when there is none, or when it belongs to another fleet. */
export function readState(file: string, since: number, seed: number): KeptState | null {
  let text: string;
  try {
    text = readFileSync(file, 'utf8');
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
    throw error;
  }
  const parsed = kept.safeParse(JSON.parse(text));
  return parsed.success && parsed.data.since === since && parsed.data.seed === seed ? parsed.data : null;
}

export function writeState(file: string, since: number, seed: number, runs: readonly SiteRun[]): void {
  const state: KeptState = {
    since,
    seed,
    sites: Object.fromEntries(
      runs.map(({ plan, plant }) => [
        plan.key,
        {
          initiators: Object.fromEntries(plant.commands.initiators),
          faults: [...plant.faults.all()],
          heard: plan.stage === 'commissioning' ? [...plant.heard] : [],
          energy: Object.fromEntries(plant.inverters.map((i) => [i.plan.name, Math.round(i.energy)])),
        },
      ]),
    ),
  };
  mkdirSync(dirname(file), { recursive: true });
  writeFileSync(`${file}.new`, JSON.stringify(state));
  renameSync(`${file}.new`, file);
}

/** Puts a site back as it was left; call before its first step. */
export function restore(run: Pick<SiteRun, 'plan' | 'plant'>, state: KeptState): void {
  const { plan, plant } = run;
  const site = state.sites[plan.key];
  if (!site) return;
  plant.forgetPlan();
  for (const [name, i] of Object.entries(site.initiators))
    plant.commands.setInitiator(name, i.open, i.since, i.by);
  plant.faults.replace(site.faults);
  for (const serial of site.heard) plant.hear(serial);
  for (const i of plant.inverters) i.energy = site.energy[i.plan.name] ?? i.energy;
}
