// Brings Wakeline up: `node src/server/up.mjs start|dev|test|check|bench|drill|torture`. Needs nothing but Node and npm;
// packages, PostgreSQL and the demo it sees to itself. The pieces are in up/.
import process from 'node:process';

const MODES = {
  start: 'the demo: database, site and simulator, until Ctrl-C',
  dev: 'the same for contributors: the site reloads as you edit',
  test: 'every check and test',
  check: 'the quick half: format, lint, types, architecture, unit tests',
  bench: 'a measurement: npm run bench -- NAME',
  torture: 'load, and everything that happens to installations, for ten minutes',
  drill: 'backs the installation up, restores it beside itself, compares',
};

function fits(version) {
  const [major, minor] = version.split('.').map(Number);
  return (major === 20 && minor >= 19) || major >= 22;
}

const [mode = '', ...rest] = process.argv.slice(2);
if (!fits(process.versions.node)) {
  process.stderr.write(
    `This is Node ${process.versions.node}; Wakeline needs Node 20.19 or newer of version 20, or 22 and later.\n` +
      'Install one of these, then start again.\n',
  );
  process.exitCode = 1;
} else if (!Object.hasOwn(MODES, mode)) {
  const list = Object.entries(MODES).map(([name, what]) => `  ${name.padEnd(7)} ${what}`);
  process.stderr.write(`Say what to bring up:\n${list.join('\n')}\n`);
  process.exitCode = 2;
} else {
  // the pieces use newer syntax: they load only where Node is new enough
  const { bringUp } = await import('./up/modes.mjs');
  process.exitCode = await bringUp(mode, rest);
}
