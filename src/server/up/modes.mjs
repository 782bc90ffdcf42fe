import fs from 'node:fs';
import process from 'node:process';
import { setTimeout as sleep } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import { dismissGuard, startGuard } from './guard-line.mjs';
import { ensurePackages } from './packages.mjs';
import { leaveAll } from './cluster.mjs';
import { endAll, refuseLaunches } from './processes.mjs';
import { root } from './place.mjs';
import { Stop } from './say.mjs';

/** What has to be undone at the end, newest first. */
const undo = [];
export const atEnd = (work) => void undo.push(work);

let ending;
/** Takes everything down, once. */
function takeDown(work) {
  ending ??= (async () => {
    const report = (error) => process.stderr.write(`${error.stack ?? error}\n`);
    refuseLaunches();
    for (const step of undo.splice(0).reverse()) await step().catch(report);
    await endAll();
    await Promise.race([work, sleep(10_000)]).catch(() => undefined); // a start that was broken off lets go of its locks
    await leaveAll().catch(report);
    dismissGuard();
  })();
  return ending;
}

const ENV_FILE = fileURLToPath(new URL('.env', root));

const load = {
  start: () => import('./start.mjs').then((m) => m.start),
  dev: () => import('./start.mjs').then((m) => m.develop),
  test: () => import('./checks.mjs').then((m) => m.test),
  check: () => import('./checks.mjs').then((m) => m.check),
  drill: () => import('./drill.mjs').then((m) => m.drill),
  bench: () => import('./bench.mjs').then((m) => m.bench),
  torture: () => import('./torture.mjs').then((m) => m.torture),
};

/** Under npm a killed npm leaves us orphaned: then there is nobody to press Ctrl-C any more. */
function endWithNpm(end) {
  if (!process.env.npm_lifecycle_event) return;
  const parent = process.ppid;
  setInterval(() => process.ppid !== parent && end(), 1000).unref();
}

/** @returns exit code */
export async function bringUp(mode, args) {
  startGuard();
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => undefined); // nobody reads any more
  let signalled;
  const interrupted = new Promise((resolve) => {
    signalled = (signal) => () => resolve({ signal });
  });
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, signalled(signal));
  endWithNpm(signalled('SIGHUP'));
  const work = (async () => {
    if (mode !== 'test' && mode !== 'check' && fs.existsSync(ENV_FILE)) process.loadEnvFile(ENV_FILE);
    await ensurePackages();
    const run = await load[mode]();
    return { code: await run(args, { atEnd }) };
  })();
  work.catch(() => undefined); // what fails while it is being taken down is no news
  let code = 0;
  try {
    const outcome = await Promise.race([work, interrupted]);
    code = outcome.signal ? (mode === 'start' || mode === 'dev' ? 0 : 130) : outcome.code;
    if (outcome.signal) process.stdout.write('\nstopping\n');
  } catch (error) {
    process.stderr.write(`\n${error instanceof Stop ? error.message : (error.stack ?? error)}\n`);
    code = 1;
  }
  await takeDown(work);
  process.stdout.write('', () => process.exit(code));
  return code;
}
