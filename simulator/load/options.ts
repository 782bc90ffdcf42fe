import { parseArgs } from 'node:util';
import { z } from 'zod';

/** A load, bounded in count and time. Shares are of the loggers, of the messages where said. */
export const loadOptions = z.strictObject({
  url: z
    .url({ protocol: /^wss?$/ })
    .refine((url) => /^(127\.|localhost$|\[::1\]$)/.test(new URL(url).hostname), {
      message: 'must be an address of this machine (127.0.0.1): load is for a machine of your own',
    }),
  secret: z.string().min(1),
  /** How many loggers, and the number of the first one. */
  loggers: z.int().min(1).max(5000),
  first: z.int().min(1).default(1),
  /** The loggers' serials: every # is a digit of the number. */
  serial: z.string().default('LG-FLEET-######'),
  /** Seconds between reports of a logger, by its own clock, and how many times faster than in life its clock runs. */
  interval: z.number().min(1).max(900).default(60),
  speed: z.number().min(0.1).max(600).default(1),
  /** Seconds of this machine's time; then what is on the way may still be acknowledged for `drain` seconds. */
  duration: z.number().min(1).max(7200),
  drain: z.number().min(0).max(300).default(30),
  /** Seconds by which every logger is behind when it begins: hours of an outage that all come at once. */
  backlog: z
    .number()
    .min(0)
    .max(7 * 86_400)
    .default(0),
  /** Messages of one logger that may be on the way without an answer. */
  window: z.int().min(1).max(1000).default(4),
  /** Seconds over which the loggers come, one after the other. */
  ramp: z.number().min(0).max(600).default(5),
  reports: z.enum(['all', 'frames']).default('all'),
  seed: z.int().min(0).default(1),
  /** UTC hour of noon at the sites; as it is now where it is not said. */
  noonHour: z.number().min(0).max(24).optional(),
  silent: z.number().min(0).max(1).default(0.02),
  stuck: z.number().min(0).max(1).default(0.02),
  shutdowns: z.number().min(0).max(1).default(0.02),
  /** Share of loggers that are cut off once, and for how long, seconds. */
  outages: z.number().min(0).max(1).default(0),
  outageS: z.number().min(1).max(3600).default(60),
  /** Share of messages that are sent twice, and of reports that come after the next one. */
  duplicates: z.number().min(0).max(1).default(0),
  disorder: z.number().min(0).max(1).default(0),
  /** Share of loggers that read acknowledgements only every few seconds. */
  slow: z.number().min(0).max(1).default(0),
  /** Share of loggers that now and then vanish in the middle of a message. */
  dead: z.number().min(0).max(1).default(0),
  /** Share of loggers whose clock jumps for some reports. */
  clockJumps: z.number().min(0).max(1).default(0),
  /** File that what was acknowledged is written to. */
  ledger: z.string().min(1).optional(),
});
export type LoadOptions = z.infer<typeof loadOptions>;
export type LoadInput = z.input<typeof loadOptions>;

export const LOAD_USAGE = `Usage: node --import tsx simulator/main.ts load --loggers N --duration S [more]
  --url URL          where to report, on this machine (else WAKELINE_INGEST_URL)
  --first N          number of the first logger; --serial LG-FLEET-######  how its serial is made of it
  --interval S       seconds between reports (60); --speed N  the loggers' clocks run so much faster (1)
  --backlog S        every logger begins so many seconds behind; --window N  messages on the way (4)
  --ramp S           loggers come over so many seconds (5); --drain S  to wait for the last answers (30)
  --reports KIND     all (frames, inputs, inverters, sensors) or frames
  --seed N  --noonHour H  --silent S  --stuck S  --shutdowns S           what is reported (shares 0 … 1)
  --outages S  --outageS N  --duplicates S  --disorder S  --slow S  --dead S  --clockJumps S   what goes wrong
  --ledger FILE      what was acknowledged, one JSON object a line
The token of each logger is made of WAKELINE_DEMO_SECRET. Ends by itself; prints one figure a line.`;

const TEXTS = new Set(['url', 'serial', 'reports', 'ledger', 'secret']);

/** Options of a command line; whatever is wrong is named with its option. */
export function readLoadOptions(args: readonly string[], env: NodeJS.ProcessEnv): LoadOptions {
  const { values } = parseArgs({
    args: [...args],
    options: Object.fromEntries(
      Object.keys(loadOptions.shape)
        .filter((name) => name !== 'secret')
        .map((name) => [name, { type: 'string' as const }]),
    ),
  });
  const given = Object.fromEntries(
    Object.entries(values).map(([name, value]) => [name, TEXTS.has(name) ? value : Number(value)]),
  );
  const parsed = loadOptions.safeParse({
    url: env.WAKELINE_INGEST_URL ?? 'ws://127.0.0.1:4321/ingest/v1',
    secret: env.WAKELINE_DEMO_SECRET,
    ...given,
  });
  if (parsed.success) return parsed.data;
  throw new Error(
    parsed.error.issues
      .map((i) => {
        const name = i.path.join('.');
        return `${name === 'secret' ? 'WAKELINE_DEMO_SECRET' : `--${name}`}: ${i.message}`;
      })
      .join('\n'),
  );
}
