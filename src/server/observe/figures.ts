import type { ProcessFigures } from '../../schemas/api/processes';
import { poolUse } from '../db/pool-use';
import { ingest } from '../ingest/service';
import { worksJobs } from '../jobs/worker';
import { liveHub } from '../live/service';
import { meters, takeLoopDelay } from './meters';

/** Sets what is a level rather than a count, as it stands now. */
export function setLevels(): void {
  const m = meters();
  const taking = ingest()?.figures();
  if (taking) {
    m.connections.set(taking.connections);
    m.loggers.set(taking.loggers);
    m.waiting.set(taking.waitingReadings);
    m.paused.set(taking.paused ? 1 : 0);
    m.sitesJudged.set(taking.sitesJudged);
    m.sitesBehind.set(taking.sitesBehind);
  }
  const hub = liveHub();
  if (hub) m.liveClients.set(hub.size);
  for (const { pool, ...use } of poolUse())
    for (const state of ['used', 'idle', 'waiting'] as const) m.pool.set({ pool, state }, use[state]);
  m.handles.set(process.getActiveResourcesInfo().length);
}

/** What there was since the last call, which begins a new span. */
export async function takeFigures(spanS: number): Promise<ProcessFigures> {
  const m = meters();
  const taking = ingest()?.figures();
  const hub = liveHub();
  const works = worksJobs();
  const ofIngest = <T>(value: T): T | null => (taking ? value : null);
  const loop = takeLoopDelay();
  m.loopDelay.set({ quantile: '0.5' }, loop.p50Ms / 1000);
  m.loopDelay.set({ quantile: '0.99' }, loop.p99Ms / 1000);
  const [commit, ack, judged, requests, jobs] = [m.commit, m.ack, m.judged, m.requests, m.jobs].map((d) =>
    d.take(),
  ) as [Taken, Taken, Taken, Taken, Taken];
  const pools = poolUse();
  const sum = (key: 'used' | 'waiting'): number => pools.reduce((n, p) => n + p[key], 0);
  return {
    readingsPerS: ofIngest(m.readings.take() / spanS),
    refused: ofIngest(m.refused.take()),
    connections: taking?.connections ?? null,
    waitingReadings: ofIngest(Math.max(taking?.waitingReadings ?? 0, ingest()?.takePeak() ?? 0)),
    pauses: ofIngest(m.pauses.take()),
    commitP95Ms: commit.p95Ms,
    ackP95Ms: ack.p95Ms,
    judgedP95Ms: judged.p95Ms,
    liveClients: hub?.size ?? null,
    liveSent: hub ? m.liveSent.take() : null,
    liveSlow: hub ? m.liveSlow.take() : null,
    jobsRun: works ? jobs.count : null,
    jobsFailed: works ? m.jobsFailed.take() : null,
    oldestDueS: works ? ((await m.oldestDue.get()).values[0]?.value ?? null) : null,
    requestsPerS: requests.count / spanS,
    requestP95Ms: requests.p95Ms,
    requestsFailed: m.requestsFailed.take(),
    loopP50Ms: loop.p50Ms,
    loopP99Ms: loop.p99Ms,
    rssBytes: process.memoryUsage.rss(),
    handles: process.getActiveResourcesInfo().length,
    poolUsed: sum('used'),
    poolWaiting: sum('waiting'),
  };
}
type Taken = ReturnType<ReturnType<typeof meters>['commit']['take']>;
