import { startSimulator, type Simulator } from '../../simulator/engine';
import type { FleetPlan } from '../../simulator/plant/plan';
import { SECRET } from './fleet';
import type { RunningSite } from './server';

/** Lets the plants of a plan report to a running site, units answering the roll call `pace` times as quick as in life. */
export const startPlant = (plan: FleetPlan, site: RunningSite, pace: number): Promise<Simulator> =>
  startSimulator({
    plan,
    ingestUrl: `${site.url.replace('http', 'ws')}/ingest/v1`,
    secret: SECRET,
    port: 0,
    pace,
  });
