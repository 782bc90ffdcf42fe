import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import process from 'node:process';
import { ensureChromium, ensureNginx, ensurePgbouncer, ensurePostgres } from './programs.mjs';
import { root } from './place.mjs';
import { run } from './processes.mjs';
import { elapsedS, say } from './say.mjs';

const tool = (file) => [process.execPath, file];
const SYNC = [...tool('node_modules/astro/astro.js'), 'sync']; // writes the types that both readers of types need
const FORMAT = [
  'format',
  [...tool('node_modules/prettier/bin/prettier.cjs'), '--check', '--log-level', 'warn', '.'],
];
const LINT = ['lint', [...tool('node_modules/eslint/bin/eslint.js'), '.', '--max-warnings', '0']];
/** What the compiler of TypeScript 7 does in half the time; linter and Astro still read with the one before. */
const TYPES = [
  'types',
  [...tool('node_modules/typescript-native/bin/tsc'), '--noEmit', '--incremental', 'false'],
];
const PAGES = [
  'types of pages', // the .astro files alone: the compiler has read the rest
  [
    ...tool('node_modules/astro/astro.js'),
    ...['check', '--minimumFailingSeverity', 'hint', '--noSync', '--tsconfig', '.ci/tsconfig.pages.json'],
  ],
];

// settings of the reader's shell are no part of a test
const OURS =
  /^(HOST|PORT|SIMULATOR_|TLS_|COOKIE_SECURE|TRUST_PROXY|LOG_LEVEL|STUCK_GRACE_S|WAKELINE_ROLES|DATABASE_URL_|DATABASE_ONE_ROLE|NODE_ENV)/;
const environment = () => ({
  ...Object.fromEntries(Object.entries(process.env).filter(([name]) => !OURS.test(name))),
  ASTRO_TELEMETRY_DISABLED: '1',
  ASTRO_DISABLE_UPDATE_CHECK: 'true',
});

async function staticCheck([name, [program, ...args]]) {
  const from = elapsedS();
  const result = await run(program, args, { cwd: root, env: environment(), niceness: 5 });
  if (result.code !== 0) {
    process.stdout.write(`${result.out.trim()}\n`);
    say(`${name} failed`);
    return { passed: 0, failed: 1 };
  }
  say(`${name} passed (${(elapsedS() - from).toFixed(1)} s)`);
  return { passed: 1, failed: 0 };
}

/** Types, one reader of them after the other. */
const types = async () => [await staticCheck(TYPES), await staticCheck(PAGES)];

/** The checks of the sources, after what they rest on; at the desk two at a time. */
async function staticChecks(atTheDesk) {
  const [program, ...args] = SYNC;
  const synced = await run(program, args, { cwd: root, env: environment() });
  if (synced.code !== 0) {
    process.stdout.write(`${synced.out.trim()}\n`);
    say('the types of Astro could not be made');
    return [{ passed: 0, failed: 1 }];
  }
  // how the sources look is for the desk: it took a tenth of the long run's time
  if (!atTheDesk) return types();
  const lanes = await Promise.all([
    staticCheck(LINT).then((lint) => [lint]),
    types().then(async (both) => [...both, await staticCheck(FORMAT)]),
  ]);
  return lanes.flat();
}

/**
 * Real counts from Vitest's own report. A test that did not run counts as failed, and so does a file that
 * could not be loaded: nothing that was written down as a test goes missing.
 */
export function countReport(report) {
  let passed = 0;
  let failed = 0;
  for (const file of report.testResults) {
    for (const { status } of file.assertionResults)
      if (status === 'passed') passed++;
      else failed++;
    if (file.status === 'failed' && !file.assertionResults.some(({ status }) => status !== 'passed'))
      failed++;
  }
  if (!report.success && failed === 0) failed++; // an error outside any test
  return { passed, failed };
}

/** Tests that failed and then passed when they were tried again: `file › name`. */
export const triedAgain = (report) =>
  report.testResults.flatMap(({ name, assertionResults }) =>
    assertionResults
      .filter((t) => t.status === 'passed' && t.failureMessages.length > 0)
      .map((t) => `${path.basename(name)} › ${t.fullName}`),
  );

/** The files that took longest by the clock, setting up left out: where time is to be saved. */
export const slowest = (report, most = 15) =>
  report.testResults
    .map(({ name, startTime, endTime }) => ({
      name: path.basename(name),
      s: (endTime - startTime) / 1000,
    }))
    .sort((a, b) => b.s - a.s)
    .slice(0, most)
    .map(({ name, s }) => `${s.toFixed(0)} s ${name}`);

async function vitest(projects) {
  const from = elapsedS();
  const report = path.join(fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-test-')), 'report.json');
  try {
    const result = await run(
      process.execPath,
      [
        ...['node_modules/vitest/vitest.mjs', 'run', ...projects.flatMap((name) => ['--project', name])],
        ...['--reporter', 'dot', '--reporter', 'json', `--outputFile.json=${report}`],
      ],
      { cwd: root, env: environment(), onLine: (line) => process.stdout.write(`${line}\n`) },
    );
    let counts = { passed: 0, failed: 1 };
    try {
      const read = JSON.parse(fs.readFileSync(report, 'utf8'));
      counts = countReport(read);
      const again = triedAgain(read);
      say(`${again.length} tests passed only when tried again${again.length > 0 ? ':' : ''}`);
      for (const test of again) say(`  ${test}`);
      for (const line of slowest(read)) say(`  ${line}`);
    } catch {
      say(`Vitest wrote no report (exit ${result.code ?? result.signal})`);
    }
    if (result.code !== 0 && counts.failed === 0) counts.failed = 1;
    say(
      `${projects.join(', ') || 'tests'}: ${counts.passed} passed, ${counts.failed} failed (${(elapsedS() - from).toFixed(1)} s)`,
    );
    return counts;
  } finally {
    fs.rmSync(path.dirname(report), { recursive: true, force: true });
  }
}

/**
 * Runs sources and tests side by side: the tests mostly wait, for plants and browsers, and come first where they do not.
 * `ready`: programs that the tests need; the sources are read meanwhile.
 */
async function sum(projects, atTheDesk, ready = Promise.resolve()) {
  const parts = await Promise.all([staticChecks(atTheDesk), ready.then(() => vitest(projects))]);
  const total = { passed: 0, failed: 0 };
  for (const { passed, failed } of parts.flat()) {
    total.passed += passed;
    total.failed += failed;
  }
  process.stdout.write(`${total.passed} passed, ${total.failed} failed\n`);
  return total.failed === 0 && total.passed > 0 ? 0 : 1;
}

/** Types and every test. The last line is `N passed, N failed`. */
export const test = () => sum([], false, ensurePrograms());

/** One after the other: two at a time would wait for Debian's lock. */
async function ensurePrograms() {
  if (!process.env.DATABASE_URL) await ensurePostgres();
  await ensureChromium();
  await ensureNginx();
  await ensurePgbouncer();
}

/** The quick half, for the desk: no database, no browser. */
export const check = () => sum(['architecture', 'unit'], true);
