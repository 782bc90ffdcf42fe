import http from 'node:http';
import https from 'node:https';
import path from 'node:path';
import process from 'node:process';
import { buildIfStale } from './build.mjs';
import { postmasterOf, startCluster } from './cluster.mjs';
import { homeOf, makeHome } from './home.mjs';
import { dropLock, holderOf, takeLock } from './lock.mjs';
import { root } from './place.mjs';
import { keepRunning } from './keep-running.mjs';
import { end, freePort, launch, listenerOf } from './processes.mjs';
import { elapsedS, say, Stop } from './say.mjs';
import { prepareDemo, stageDatabase } from './stage.mjs';

const HELP_HOME = 'set WAKELINE_HOME, PORT and SIMULATOR_PORT to others to run a second one beside it';

function portFrom(name, usual) {
  const text = process.env[name];
  if (!text) return usual;
  const port = Number(text);
  if (!Number.isInteger(port) || port < 1 || port > 65_535)
    throw new Stop(`${name} is "${text}", which is no port.`, 'Give a number from 1 to 65535.');
  return port;
}

async function needPort(name, port, host) {
  if (await freePort(port, host)) return;
  const who = listenerOf(port);
  throw new Stop(
    `Port ${port} is taken${who ? ` by ${who}` : ''}.`,
    `End that program, or start with another port: ${name}=${port + 10} npm start`,
  );
}

/** One demo a home: two simulators would speak for the same loggers. */
function claimHome(home, address, atEnd) {
  makeHome(home);
  const lock = path.join(home, 'running.lock');
  if (!takeLock(lock, { address })) {
    const holder = holderOf(lock);
    throw new Stop(
      `Wakeline already runs from ${home}: ${holder?.address ?? ''} (process ${holder?.pid ?? '?'}).`,
      `Use that one, end it with Ctrl-C in its window, or ${HELP_HOME}.`,
    );
  }
  atEnd(() => Promise.resolve(dropLock(lock)));
}

/** Lines of a part that runs along, marked with its name; errors of the simulator must not drown. */
function show(child, name) {
  for (const stream of [child.stdout, child.stderr]) {
    let partial = '';
    stream?.setEncoding('utf8').on('data', (chunk) => {
      const lines = (partial + chunk).split('\n');
      partial = lines.pop() ?? '';
      for (const line of lines) if (line.trim()) process.stdout.write(`${name} │ ${line}\n`);
    });
  }
}

function settings(stage, addresses, { host, port, simulatorPort, address, post }) {
  return {
    ...process.env,
    PUBLIC_URL: process.env.PUBLIC_URL || address,
    // a demo without a mail server of its own has the local post
    SMTP_URL: process.env.SMTP_URL || (post ? `smtp://127.0.0.1:${post.port}` : ''),
    LOCAL_MAIL_FOLDER: post && !process.env.SMTP_URL ? post.folder : '',
    DATABASE_URL: stage.url,
    DATABASE_URL_APP: addresses.oneRole ? '' : addresses.appUrl,
    DATABASE_URL_INGEST: addresses.oneRole ? '' : addresses.ingestUrl,
    DATABASE_ONE_ROLE: addresses.oneRole ? '1' : '0',
    HOST: host,
    PORT: String(port),
    SIMULATOR_URL: stage.hasDemo ? `http://127.0.0.1:${simulatorPort}` : '',
    LOG_LEVEL: process.env.LOG_LEVEL || 'warn',
    ASTRO_TELEMETRY_DISABLED: '1',
    ASTRO_DISABLE_UPDATE_CHECK: 'true',
  };
}

/** Asks a page for its head, whoever signed the certificate: it is our own site on this machine. */
const knock = (url) =>
  new Promise((resolve, reject) => {
    const { get } = url.startsWith('https:') ? https : http;
    get(url, { rejectUnauthorized: false }, (response) => resolve(response.resume())).on('error', reject);
  });

/** Waits until the site answers; ends early where the part dies first. */
async function answers(url, died) {
  let gone;
  void died.then((how) => (gone = how));
  for (let i = 0; i < 600; i++) {
    if (gone) return false;
    try {
      await knock(url);
      return true;
    } catch {
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
  }
  throw new Stop(`${url} does not answer.`, 'See the lines above for why.');
}

function launchSimulator(env, { scheme, reach, simulatorPort, stage }) {
  const simulator = launch(process.execPath, ['--import', 'tsx', 'simulator/main.ts'], {
    cwd: root,
    env: {
      ...env,
      DATABASE_URL: '', // it knows the plant by its own plan, and has no business in the database
      DATABASE_URL_APP: '',
      DATABASE_URL_INGEST: '',
      WAKELINE_INGEST_URL: `${scheme === 'https' ? 'wss' : 'ws'}://${reach}/ingest/v1`,
      NODE_EXTRA_CA_CERTS: (scheme === 'https' && process.env.TLS_CERT) || process.env.NODE_EXTRA_CA_CERTS, // it may be signed by itself
      WAKELINE_DEMO_SECRET: stage.state.demoSecret,
      WAKELINE_DEMO_SINCE: stage.state.demoSince ? String(stage.state.demoSince) : undefined,
      WAKELINE_SIM_STATE: path.join(stage.home, 'simulator.json'),
      WAKELINE_URL: `${scheme}://${reach}/`,
      SIMULATOR_PORT: String(simulatorPort),
    },
  });
  show(simulator, 'simulator');
  return simulator;
}

/** A database server that was killed is started again; the site finds it by itself. Rejects where that fails. */
function watchDatabase(stage, atEnd) {
  if (!stage.own) return new Promise(() => undefined);
  return new Promise((_, reject) => {
    let busy = false;
    const timer = setInterval(() => {
      if (busy || postmasterOf(stage.home)?.ours) return;
      busy = true;
      say('PostgreSQL has ended: starting it again');
      startCluster(stage.home)
        .then(({ state }) => {
          if (state.port !== stage.state.port)
            throw new Stop(`PostgreSQL came back on another port (${state.port}).`, 'Start again.');
          busy = false;
        })
        .catch(reject);
    }, 2000);
    atEnd(() => Promise.resolve(clearInterval(timer)));
  });
}

/** The demo's mail server: takes every letter, sends none on. */
async function launchLocalPost(home, atEnd) {
  const post = { folder: path.join(home, 'letters'), port: await freePort(0) };
  const child = launch(
    process.execPath,
    ['--import', 'tsx', 'src/server/mail/main.ts', post.folder, String(post.port)],
    { cwd: root },
  );
  child.stdout?.resume(); // its one line is no news
  child.stderr?.pipe(process.stderr);
  atEnd(() => end(child));
  return post;
}

const SIGN_INS = [
  ['manager@lowfield.example', 'manager'],
  ['technician@lowfield.example', 'technician'],
  ['analyst@lowfield.example', 'analyst'],
  ['customer@lowfield.example', 'customer, sees two sites'],
  ['manager@harbourline.example', 'manager of another organisation'],
];

function welcome(address, simulatorPort, ready) {
  const demo = [
    `The plant's switches: http://127.0.0.1:${simulatorPort}/ (the simulator: initiators, faults, what is true)`,
    '',
    'Sign in with the password roof-ladder-meter as',
    ...SIGN_INS.map(([email, who]) => `  ${email.padEnd(28)} ${who}`),
  ];
  const lines = [
    '',
    `Wakeline is at ${address}`,
    ...(simulatorPort ? demo : []),
    '',
    `Ready in ${ready.toFixed(1)} s. Ctrl-C ends all of it.`,
    '',
  ];
  process.stdout.write(lines.join('\n') + '\n');
}

async function bringUpDemo(args, atEnd, { prepare = () => Promise.resolve(), secure = false, launchSite }) {
  const unknown = args.filter((arg) => arg !== '--fresh');
  if (unknown.length > 0)
    throw new Stop(
      `Unknown: ${unknown.join(' ')}.`,
      'The one option is --fresh, which writes the demo anew.',
    );
  const host = process.env.HOST || '127.0.0.1';
  const port = portFrom('PORT', 4321);
  const simulatorPort = portFrom('SIMULATOR_PORT', 4322);
  const reach = `${host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host}:${port}`;
  const scheme = secure ? 'https' : 'http';
  const address = `${scheme}://${reach}/`;
  claimHome(homeOf('demo'), address, atEnd);
  await needPort('PORT', port, host);
  await needPort('SIMULATOR_PORT', simulatorPort, '127.0.0.1');

  const stage = await stageDatabase('demo');
  const prepared = prepare(); // goes on while the demo is written: two cores are better than one
  prepared.catch(() => undefined);
  const addresses = await prepareDemo(stage, { fresh: args.includes('--fresh') });
  const post = stage.hasDemo && !process.env.SMTP_URL ? await launchLocalPost(stage.home, atEnd) : undefined;
  const env = settings(stage, addresses, { host, port, simulatorPort, address, post });
  await prepared;
  let stands = false;
  const siteEnded = keepRunning(
    () => launchSite(env),
    { name: 'The site', patienceMs: 20_000, stands: () => stands },
    atEnd,
  );
  say(stage.hasDemo ? 'starting the site and the simulator' : 'starting the site');
  const parts = [siteEnded];
  if (stage.hasDemo)
    parts.push(
      keepRunning(
        () => launchSimulator(env, { scheme, reach, simulatorPort, stage }),
        { name: 'The simulator' },
        atEnd,
      ),
    );
  if (await answers(`${address}sign-in`, siteEnded)) {
    stands = true;
    welcome(address, stage.hasDemo ? simulatorPort : undefined, elapsedS());
  }
  const { name, code, signal } = await Promise.race([...parts, watchDatabase(stage, atEnd)]);
  throw new Stop(
    `${name} ended by itself (${signal ?? `exit ${code}`}).`,
    'See the lines above for why; everything is taken down.',
  );
}

/** The demo from the build. */
export function start(args, { atEnd }) {
  return bringUpDemo(args, atEnd, {
    prepare: buildIfStale,
    secure: Boolean(process.env.TLS_CERT),
    launchSite: (env) => {
      const site = launch(process.execPath, ['--max-semi-space-size=64', 'src/server/serve.mjs'], {
        cwd: root,
        env: { ...env, NODE_ENV: 'production' },
        stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
      });
      show(site, 'site');
      return site;
    },
  });
}

/** The demo from the sources, reloaded as they change. */
export function develop(args, { atEnd }) {
  // the development server speaks plain HTTP, and a cookie for HTTPS only would never come back to it
  for (const name of ['TLS_CERT', 'TLS_KEY', 'COOKIE_SECURE']) delete process.env[name];
  return bringUpDemo(args, atEnd, {
    launchSite: (env) => {
      const where = ['--host', env.HOST, '--port', env.PORT];
      const site = launch(process.execPath, ['node_modules/astro/astro.js', 'dev', ...where], {
        cwd: root,
        env: { ...env, LOG_LEVEL: process.env.LOG_LEVEL || 'info' },
      });
      show(site, 'site');
      return site;
    },
  });
}
