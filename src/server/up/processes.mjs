import { spawn } from 'node:child_process';
import fs from 'node:fs';
import net from 'node:net';
import process from 'node:process';
import { tell } from './guard-line.mjs';

/**
 * When a process began, in the kernel's ticks; with the pid it names a process for good, for pids are used again.
 * Empty where there is no /proc, or where only a zombie is left.
 */
export function bornAt(pid) {
  try {
    const stat = fs.readFileSync(`/proc/${pid}/stat`, 'utf8');
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
    return fields[0] === 'Z' || fields[0] === 'X' ? '' : (fields[19] ?? '');
  } catch {
    return '';
  }
}

const procfs = fs.existsSync('/proc/self/stat');

/** Whether the process still runs: a zombie does not, nor does another process under a reused pid. */
export function isAlive(pid, born) {
  if (!Number.isInteger(pid) || pid <= 0) return false;
  if (procfs) {
    const now = bornAt(pid);
    return now !== '' && (born === undefined || born === '' || now === born);
  }
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === 'EPERM';
  }
}

/** Processes whose working directory is `directory`. Every PostgreSQL process works in its data directory. */
export function processesIn(directory) {
  if (!procfs) return [];
  const real = fs.realpathSync(directory);
  return fs
    .readdirSync('/proc')
    .filter((entry) => /^\d+$/.test(entry))
    .map(Number)
    .filter((pid) => {
      try {
        return fs.readlinkSync(`/proc/${pid}/cwd`) === real;
      } catch {
        return false;
      }
    });
}

/** The port if it can be listened on, 0 if it is taken; for port 0 any free one. */
export function freePort(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const server = net.createServer();
    server.once('error', () => resolve(0));
    server.listen({ port, host, exclusive: true }, () => {
      const { port: got } = server.address();
      server.close(() => resolve(got));
    });
  });
}

/** Who listens on a TCP port, as far as this account may see: `node (process 812)`. */
export function listenerOf(port) {
  const wanted = port.toString(16).toUpperCase().padStart(4, '0');
  const inodes = new Set();
  for (const table of ['/proc/net/tcp', '/proc/net/tcp6'])
    try {
      for (const line of fs.readFileSync(table, 'utf8').split('\n').slice(1)) {
        const field = line.trim().split(/\s+/);
        if (field[3] === '0A' && field[1]?.endsWith(`:${wanted}`)) inodes.add(`socket:[${field[9]}]`);
      }
    } catch {
      // no such table here: say nothing about who
    }
  if (inodes.size === 0) return '';
  for (const pid of fs.readdirSync('/proc').filter((entry) => /^\d+$/.test(entry)))
    try {
      for (const fd of fs.readdirSync(`/proc/${pid}/fd`))
        if (inodes.has(fs.readlinkSync(`/proc/${pid}/fd/${fd}`)))
          return `${fs.readFileSync(`/proc/${pid}/comm`, 'utf8').trim()} (process ${pid})`;
    } catch {
      // another account's process, or gone meanwhile
    }
  return '';
}

const running = new Set();
let ending = false;

/** From now on only what belongs to the end itself may be started. */
export function refuseLaunches() {
  ending = true;
}

/**
 * Starts a program in a process group of its own, so that Ctrl-C in the terminal reaches only us and we
 * take things down in order; the guard ends it should we be killed.
 */
export function launch(program, args, { evenAtEnd = false, ...options } = {}) {
  if (ending && !evenAtEnd)
    throw new Error(`${program} is not started any more: everything is being taken down`);
  const child = spawn(program, args, { stdio: ['ignore', 'pipe', 'pipe'], ...options, detached: true });
  if (child.pid) {
    running.add(child);
    tell({ watch: child.pid, born: bornAt(child.pid) });
    child.once('close', () => {
      running.delete(child);
      tell({ unwatch: child.pid });
    });
  }
  return child;
}

/** Runs a program to its end, `niceness` behind others. Never rejects on a bad exit: the caller reads `code` and `out`. */
export function run(program, args, options = {}) {
  const { input, onLine, niceness, ...rest } = options;
  const [first, ...others] = niceness
    ? ['nice', '-n', String(niceness), program, ...args]
    : [program, ...args];
  return new Promise((resolve, reject) => {
    const child = launch(first, others, {
      ...rest,
      stdio: [input === undefined ? 'ignore' : 'pipe', 'pipe', 'pipe'],
    });
    let out = '';
    let partial = '';
    const take = (chunk) => {
      out += chunk;
      if (!onLine) return;
      const lines = (partial + chunk).split('\n');
      partial = lines.pop() ?? '';
      lines.forEach(onLine);
    };
    child.stdout.setEncoding('utf8').on('data', take);
    child.stderr.setEncoding('utf8').on('data', take);
    if (input !== undefined) child.stdin.end(input);
    child.once('error', reject);
    child.once('close', (code, signal) => {
      if (onLine && partial) onLine(partial);
      resolve({ code, signal, out });
    });
  });
}

/** A signal to the process group that `launch` made. */
export function signalGroup(child, signal) {
  if (!child.pid || child.exitCode !== null || child.signalCode !== null) return;
  try {
    process.kill(-child.pid, signal);
  } catch (error) {
    if (error.code !== 'ESRCH') throw error;
  }
}

/** Ends a launched program: politely, then after `patienceMs` for good. */
export function end(child, patienceMs = 8000) {
  if (!child.pid || child.exitCode !== null || child.signalCode !== null) return Promise.resolve();
  return new Promise((resolve) => {
    const force = setTimeout(() => signalGroup(child, 'SIGKILL'), patienceMs);
    child.once('exit', () => {
      clearTimeout(force);
      resolve();
    });
    signalGroup(child, 'SIGTERM');
  });
}

/** Ends whatever `launch` and `run` still have running. */
export const endAll = () => Promise.all([...running].map((child) => end(child, 3000)));
