import { parseArgs } from 'node:util';
import { startSimulator } from './engine';
import { readScenario } from './scenarios/read';
import { DEMO_SEED, demoFleet } from './scenarios/demo';
import { LOAD_USAGE, readLoadOptions } from './load/options';
import { startLoad } from './load/run';
import { z } from 'zod';

/**
 * The plant as a program of its own. Environment: WAKELINE_INGEST_URL, WAKELINE_DEMO_SECRET, SIMULATOR_PORT,
 * WAKELINE_DEMO_SINCE (epoch seconds for which the demo was laid out), WAKELINE_SIM_STATE (file that keeps switches
 * and faults between starts). `--scenario FILE` runs a scenario from a file instead of the demo.
 */
const USAGE = `Usage: node --import tsx simulator/main.ts [--scenario FILE] [--pace N]
  --scenario FILE  sites, faults and switches from a scenario file
  --pace N         units answer a roll call N times faster than in life
       … simulator/main.ts load --help    many loggers that only make load`;

const environment = z.object({
  WAKELINE_INGEST_URL: z.url({ protocol: /^wss?$/ }).default('ws://127.0.0.1:4321/ingest/v1'),
  WAKELINE_DEMO_SECRET: z.string().min(1, 'is needed: the same text as the seed had'),
  SIMULATOR_PORT: z.coerce.number().int().min(0).max(65_535).default(4322),
  WAKELINE_DEMO_SINCE: z.coerce.number().int().min(1_500_000_000).optional(),
  WAKELINE_SIM_STATE: z.string().min(1).optional(),
});

async function load(args: readonly string[]): Promise<void> {
  if (args.includes('--help')) {
    process.stdout.write(`${LOAD_USAGE}\n`);
    return;
  }
  const run = startLoad(readLoadOptions(args, process.env));
  const stop = () => void run.stop();
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
  process.on('disconnect', stop);
  const figures = await run.done;
  for (const line of figures.lines()) process.stdout.write(`${line}\n`);
  for (const [field, { count, reason }] of figures.refusals)
    process.stderr.write(`${count} refused: ${field} ${reason}\n`);
}

async function main(): Promise<void> {
  if (process.argv[2] === 'load') {
    await load(process.argv.slice(3));
    return;
  }
  const { values } = parseArgs({
    options: {
      scenario: { type: 'string' },
      pace: { type: 'string', default: '1' },
      help: { type: 'boolean' },
    },
  });
  if (values.help) {
    process.stdout.write(`${USAGE}\n`);
    return;
  }
  const pace = Number(values.pace);
  if (!(pace > 0)) throw new Error(`--pace must be a number above 0, not "${values.pace}".`);
  const parsed = environment.safeParse(process.env);
  if (!parsed.success)
    throw new Error(parsed.error.issues.map((i) => `${i.path.join('.')} ${i.message}`).join('\n'));
  const env = parsed.data;
  const since = env.WAKELINE_DEMO_SINCE ?? Math.floor(Date.now() / 60_000) * 60;
  const plan = values.scenario ? readScenario(values.scenario, since) : demoFleet(DEMO_SEED, since);
  const simulator = await startSimulator({
    plan,
    ingestUrl: env.WAKELINE_INGEST_URL,
    secret: env.WAKELINE_DEMO_SECRET,
    port: env.SIMULATOR_PORT,
    pace,
    ...(env.WAKELINE_SIM_STATE ? { stateFile: env.WAKELINE_SIM_STATE } : {}),
  });
  process.stdout.write(
    `The plant runs: ${simulator.runs.length} sites, ${simulator.units} units. Its switches: ${simulator.pageUrl ?? ''}\n`,
  );
  const stop = () => {
    simulator.stop().then(
      () => process.exit(0),
      () => process.exit(1),
    );
  };
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
  process.on('disconnect', stop);
}

main().catch((error: unknown) => {
  process.stderr.write(
    `The simulator did not start. ${error instanceof Error ? error.message : String(error)}\n`,
  );
  process.exitCode = 1;
});
