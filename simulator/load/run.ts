import { LoadFigures } from './figures';
import type { LoadShape } from './frames';
import { Ledger } from './ledger';
import { LoadLogger } from './load-logger';
import { loadOptions, type LoadInput } from './options';

export interface LoadRun {
  readonly loggers: readonly LoadLogger[];
  readonly figures: LoadFigures;
  readonly ledger: Ledger;
  readonly shape: LoadShape;
  /** Loggers that have said hello and have their roster. */
  connected(): number;
  /** Resolves when the duration is over and what was on the way is answered, or the time for that is over too. */
  readonly done: Promise<LoadFigures>;
  /** Ends before its time, in the same way. */
  stop(): Promise<LoadFigures>;
}

const TICK_MS = 25;

const serialOf = (pattern: string, number: number): string =>
  pattern.replace(/#+/, (digits) => String(number).padStart(digits.length, '0'));

/** Starts the loggers of a load; it ends by itself. */
export function startLoad(given: LoadInput): LoadRun {
  const options = loadOptions.parse(given);
  const startMs = performance.now();
  const startS = Date.now() / 1000;
  const elapsedS = () => (performance.now() - startMs) / 1000;
  // faster clocks begin earlier, so that none is ever ahead of this machine's
  const firstS = startS - options.duration * (options.speed - 1);
  const clock = () => firstS + elapsedS() * options.speed;
  const shape: LoadShape = {
    seed: options.seed,
    noonHour: options.noonHour ?? (startS % 86_400) / 3600,
    silent: options.silent,
    stuck: options.stuck,
    shutdowns: options.shutdowns,
  };
  const figures = new LoadFigures();
  const ledger = new Ledger(options.ledger);
  const loggers = Array.from(
    { length: options.loggers },
    (_, i) =>
      new LoadLogger(serialOf(options.serial, options.first + i), shape, options, figures, ledger, clock),
  );
  let started = 0;
  let endingS = Infinity;
  let finish: () => void = () => undefined;
  const over = new Promise<void>((resolve) => {
    finish = resolve;
  });
  const timer = setInterval(() => {
    const s = elapsedS();
    const share = options.ramp === 0 ? 1 : Math.min(1, s / options.ramp);
    for (; started < Math.ceil(loggers.length * share); started++) loggers[started]?.connection.start();
    if (s >= options.duration && endingS === Infinity) endingS = s;
    if (s >= endingS) {
      for (const l of loggers) l.end();
      const waiting = loggers.some((l) => l.unanswered > 0);
      if (!waiting || s >= endingS + options.drain) {
        clearInterval(timer);
        finish();
        return;
      }
    }
    for (let i = 0; i < started; i++) loggers[i]?.tick(s);
  }, TICK_MS);
  const done = over.then(async () => {
    for (const l of loggers) l.connection.stop();
    await ledger.close();
    return figures;
  });
  return {
    loggers,
    figures,
    ledger,
    shape,
    connected: () => loggers.reduce((n, l) => n + (l.connection.connected ? 1 : 0), 0),
    done,
    stop: () => {
      endingS = Math.min(endingS, elapsedS());
      return done;
    },
  };
}
