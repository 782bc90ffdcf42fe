import { createHistogram, type RecordableHistogram } from 'node:perf_hooks';

/** What the loggers of a run did and heard, counted. */
export class LoadFigures {
  sentMessages = 0;
  sentReadings = 0;
  /** Of the messages sent: again after a connection broke, and on purpose. */
  repeated = 0;
  duplicates = 0;
  acknowledgedMessages = 0;
  acknowledgedReadings = 0;
  refused = 0;
  /** Why, by field: how often, and one reason. */
  readonly refusals = new Map<string, { count: number; reason: string }>();
  waits = 0;
  outages = 0;
  vanished = 0;
  clockJumps = 0;
  private histogram: RecordableHistogram = createHistogram();

  /** @param tookMs from sending a message to its acknowledgement, of a logger that reads at once */
  latency(tookMs: number): void {
    this.histogram.record(Math.max(1, Math.round(tookMs * 1000)));
  }

  /** Milliseconds under which this share of acknowledgements came (0 … 1); NaN: none came. */
  latencyMs(share: number): number {
    return this.histogram.count === 0 ? NaN : this.histogram.percentile(share * 100) / 1000;
  }

  get latencyMaxMs(): number {
    return this.histogram.count === 0 ? NaN : this.histogram.max / 1000;
  }

  /** Latencies count anew from here on. */
  newPhase(): void {
    this.histogram = createHistogram();
  }

  /** One figure a line: name value unit. */
  *lines(): Generator<string> {
    yield `load.sent ${this.sentMessages} messages`;
    yield `load.sent_readings ${this.sentReadings} readings`;
    yield `load.repeated ${this.repeated} messages`;
    yield `load.duplicates ${this.duplicates} messages`;
    yield `load.acknowledged ${this.acknowledgedMessages} messages`;
    yield `load.acknowledged_readings ${this.acknowledgedReadings} readings`;
    yield `load.refused ${this.refused} messages`;
    yield `load.waits ${this.waits} times`;
    yield `load.outages ${this.outages} times`;
    yield `load.vanished ${this.vanished} times`;
    yield `load.clock_jumps ${this.clockJumps} times`;
    if (this.histogram.count === 0) return;
    for (const [name, share] of [
      ['p50', 0.5],
      ['p95', 0.95],
      ['p99', 0.99],
    ] as const)
      yield `load.ack_${name}_ms ${this.latencyMs(share).toFixed(1)} ms`;
    yield `load.ack_max_ms ${this.latencyMaxMs.toFixed(1)} ms`;
  }
}
