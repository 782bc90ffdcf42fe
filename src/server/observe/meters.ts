import { createHistogram, monitorEventLoopDelay } from 'node:perf_hooks';
import { collectDefaultMetrics, Counter, Gauge, Histogram, Registry } from 'prom-client';

/**
 * What this process counts and times while it works, in two forms: since its start for whoever scrapes `/metrics`, and
 * since the last look for the minute's sample (sampler.ts). Labels are of closed sets, so that nobody outside can make
 * series.
 */

const QUICK_S = [0.001, 0.0025, 0.005, 0.01, 0.025, 0.05, 0.1, 0.2, 0.5, 1, 2.5, 5, 10, 30];
const JOB_S = [0.01, 0.05, 0.1, 0.5, 1, 5, 15, 60, 300, 1800];
const LOOP_RESOLUTION_MS = 10;
/** A duration of the minute's histogram is µs, an hour at most. */
const LONGEST_US = 3_600_000_000;

/** What a span of time held: how many durations, and the one that 95 of 100 stayed below; null where there were none. */
export interface Timed {
  count: number;
  p95Ms: number | null;
}

/** Durations of one kind of work. */
class Durations<L extends string = never> {
  private readonly span = createHistogram({ lowest: 1, highest: LONGEST_US, figures: 2 });
  constructor(private readonly all: Histogram<L>) {}

  observe(seconds: number, labels?: Record<L, string>): void {
    if (labels) this.all.observe(labels, seconds);
    else this.all.observe(seconds);
    this.span.record(Math.min(LONGEST_US, Math.max(1, Math.round(seconds * 1e6))));
  }

  /** What there was since the last call. */
  take(): Timed {
    const { count } = this.span;
    const p95Ms = count === 0 ? null : this.span.percentile(95) / 1000;
    this.span.reset();
    return { count, p95Ms };
  }
}

/** A count, with what was added since the last look. */
class Counted<L extends string = never> {
  private added = 0;
  constructor(private readonly all: Counter<L>) {}

  add(n = 1, labels?: Record<L, string>): void {
    if (labels) this.all.inc(labels, n);
    else this.all.inc(n);
    this.added += n;
  }

  take(): number {
    const { added } = this;
    this.added = 0;
    return added;
  }
}

function make() {
  const registry = new Registry();
  collectDefaultMetrics({ register: registry });
  const registers = [registry];
  const counter = <L extends string = never>(name: string, help: string, labelNames: readonly L[] = []) =>
    new Counted<L>(
      new Counter<L>({ name: `wakeline_${name}`, help, labelNames: [...labelNames], registers }),
    );
  const durations = <L extends string = never>(
    name: string,
    help: string,
    buckets: number[],
    labelNames: readonly L[] = [],
  ) =>
    new Durations<L>(
      new Histogram<L>({ name: `wakeline_${name}`, help, buckets, labelNames: [...labelNames], registers }),
    );
  const gauge = <L extends string = never>(name: string, help: string, labelNames: readonly L[] = []) =>
    new Gauge<L>({ name: `wakeline_${name}`, help, labelNames: [...labelNames], registers });
  const loop = monitorEventLoopDelay({ resolution: LOOP_RESOLUTION_MS });
  loop.enable();
  return {
    registry,
    readings: counter('ingest_readings_total', 'Readings made durable'),
    frames: counter('ingest_frames_total', 'String frames made durable'),
    refused: counter('ingest_refused_total', 'Messages of loggers refused, by class of reason', ['reason']),
    unknownTokens: counter('ingest_unknown_tokens_total', 'Connections tried with a token that nobody knows'),
    commit: durations('ingest_commit_seconds', 'From sending a batch to its last COMMIT', QUICK_S),
    ack: durations('ingest_ack_seconds', 'From taking a message to its acknowledgement', QUICK_S),
    judged: durations('ingest_judged_seconds', 'From COMMIT until verdicts and events are written', QUICK_S),
    connections: gauge('ingest_connections', 'Open connections of loggers'),
    loggers: gauge('ingest_loggers', 'Loggers that this process serves'),
    waiting: gauge('queue_waiting_readings', 'Readings that wait to be written'),
    paused: gauge('queue_paused', '1 while sockets are paused because too much waits'),
    pauses: counter('queue_pauses_total', 'Times that sockets were paused'),
    sitesJudged: gauge('judgement_sites', 'Sites that this process judges'),
    sitesBehind: gauge('judgement_sites_behind', 'Sites whose stored frames are being caught up with'),
    liveClients: gauge('live_clients', 'Browsers that listen'),
    liveSent: counter('live_messages_total', 'Messages sent to browsers'),
    liveSlow: counter('live_closed_slow_total', 'Browsers sent away because they read too slowly'),
    jobs: durations('job_seconds', 'Runs of background jobs, by kind and outcome', JOB_S, [
      'kind',
      'outcome',
    ]),
    jobsFailed: counter('job_failures_total', 'Runs of background jobs that failed, by kind', ['kind']),
    oldestDue: gauge('jobs_oldest_due_seconds', 'For how long the oldest due job has waited'),
    requests: durations('http_request_seconds', 'Requests, by route, method and status', QUICK_S, [
      'route',
      'method',
      'status',
    ]),
    requestsFailed: counter('http_failures_total', 'Requests answered with a status of 500 and above'),
    pool: gauge('pool_connections', 'Connections to the database', ['pool', 'state']),
    loopDelay: gauge('event_loop_delay_seconds', 'Delay of the event loop since the last look', ['quantile']),
    handles: gauge('open_handles', 'Open handles and requests of the process'),
    loop,
  };
}

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.meters');
const shared = globalThis as unknown as Record<symbol, ReturnType<typeof make> | undefined>;

export const meters = (): ReturnType<typeof make> => (shared[KEY] ??= make());

/** What the loop's delay was since the last call, ms; the timer's own interval is taken off. */
export function takeLoopDelay(): { p50Ms: number; p99Ms: number } {
  const { loop } = meters();
  const of = (percentile: number): number =>
    Math.max(0, loop.percentile(percentile) / 1e6 - LOOP_RESOLUTION_MS);
  // before the first tick of its timer it knows nothing
  const delay = loop.count === 0 ? { p50Ms: 0, p99Ms: 0 } : { p50Ms: of(50), p99Ms: of(99) };
  loop.reset();
  return delay;
}

const METHODS = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS']);

/** One answered request. */
export function countRequest(
  route: string,
  method: string | undefined,
  status: number,
  seconds: number,
): void {
  const { requests, requestsFailed } = meters();
  const named = method && METHODS.has(method) ? method : 'other';
  requests.observe(seconds, { route, method: named, status: String(status) });
  if (status >= 500) requestsFailed.add();
}

const CLASSES: readonly (readonly [RegExp, string])[] = [
  [/^(type|seq|protocol|logger|firmware)$/, 'protocol'],
  [/^roster$/, 'roster'],
  [/^(at|since|startedAt|clock)$/, 'time'],
  [/^(string|zone|transmitter|sensor|inverter|input|gateway)$/, 'unknown_part'],
];

/** What kind of reason a refusal has: one of a handful, whatever the logger wrote. */
export function refusalClass(field: string, reason: string): string {
  if (field === 'message') return reason.startsWith('there was no room') ? 'no_room' : 'unreadable';
  const last = /([A-Za-z]+)(\[\d+\])*$/.exec(field)?.[1] ?? '';
  return CLASSES.find(([names]) => names.test(last))?.[1] ?? 'value';
}
