import { createHash } from 'node:crypto';
import fs from 'node:fs/promises';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import zlib from 'node:zlib';
import node from '@astrojs/node';
import type { AstroIntegration } from 'astro';
import { build } from 'esbuild';
import { paths } from '../schemas/paths';
import { migrationsKnown } from './observe/migrations-known';

type Roles = typeof import('./roles');
type Probes = typeof import('./observe/probes');

const COMPRESSED = /\.(js|css|html|svg|json|xml|txt)$/;
const WORTH_BYTES = 1024;

/** Beside every text file of the build a .gz and a .br: sirv sends them as they are. */
async function compress(folder: string): Promise<void> {
  const gzip = promisify(zlib.gzip);
  const brotli = promisify(zlib.brotliCompress);
  for (const entry of await fs.readdir(folder, { recursive: true, withFileTypes: true })) {
    if (!entry.isFile() || !COMPRESSED.test(entry.name)) continue;
    const file = path.join(entry.parentPath, entry.name);
    const content = await fs.readFile(file);
    if (content.length < WORTH_BYTES) continue;
    await fs.writeFile(`${file}.gz`, await gzip(content, { level: 9 }));
    await fs.writeFile(`${file}.br`, await brotli(content));
  }
}

/**
 * The worker of the phone's page as one file at the root of the build. It carries a name made of the build's files, so
 * that a browser takes the worker of another build for another one.
 */
async function buildWorker(client: string): Promise<void> {
  const files = await fs.readdir(client, { recursive: true });
  const pages = await fs.readdir(path.join(client, '../server'), { recursive: true });
  const name = createHash('sha256')
    .update([...files, ...pages].sort().join('\n'))
    .digest('hex')
    .slice(0, 16);
  await build({
    entryPoints: [fileURLToPath(new URL('../lib/capture-worker.ts', import.meta.url))],
    outfile: path.join(client, 'capture-worker.js'),
    bundle: true,
    minify: true,
    format: 'iife',
    target: 'es2022',
    define: { WAKELINE_BUILD: JSON.stringify(name) },
    logLevel: 'warning',
  });
}

/** @astrojs/node with our own server entry: one bundle, and the sockets of loggers and browsers in development too. */
export default function host(): AstroIntegration {
  const base = node({ mode: 'middleware' });
  return {
    ...base,
    hooks: {
      ...base.hooks,
      'astro:config:setup': (setup) => {
        // not Astro's own word for it, which a build that a test runner starts takes from the runner
        const development = setup.command === 'dev';
        setup.updateConfig({
          vite: {
            define: {
              WAKELINE_DEVELOPMENT: String(development),
              WAKELINE_MIGRATIONS: JSON.stringify(migrationsKnown()),
            },
          },
        });
        return base.hooks['astro:config:setup']?.(setup);
      },
      'astro:config:done': (done) =>
        base.hooks['astro:config:done']?.({
          ...done,
          setAdapter: (adapter) =>
            done.setAdapter({
              ...adapter,
              serverEntrypoint: fileURLToPath(new URL('./entry.ts', import.meta.url)),
              exports: ['handler', 'options', 'startServer'],
            }),
        }),
      'astro:server:setup': ({ server, logger }) => {
        let roles: Promise<Roles> | undefined;
        const load = (): Promise<Roles> =>
          (roles ??= server.ssrLoadModule('/src/server/roles.ts') as Promise<Roles>);
        const report = (error: unknown): void =>
          logger.error(error instanceof Error ? (error.stack ?? error.message) : String(error));
        const probes = new Set<string>(Object.values(paths.probes).map((path) => path()));
        server.middlewares.use((req, res, next) => {
          if (!probes.has(req.url?.split('?', 1)[0] ?? '')) return next();
          (server.ssrLoadModule('/src/server/observe/probes.ts') as Promise<Probes>)
            .then((loaded) => loaded.answerProbe(req, res))
            .catch(next);
        });
        server.httpServer?.once('listening', () => {
          load()
            .then((loaded) => loaded.startRoles())
            .catch(report);
        });
        server.httpServer?.on('upgrade', (req, socket, head: Buffer) => {
          if (req.headers['sec-websocket-protocol']?.startsWith('vite')) return; // Vite's own
          load()
            .then(
              (loaded) =>
                loaded.routeUpgrade(req, socket, head) || loaded.refuseUpgrade(socket, '404 Not Found'),
            )
            .catch((error: unknown) => {
              report(error);
              socket.destroy();
            });
        });
      },
      'astro:build:done': async (done) => {
        await base.hooks['astro:build:done']?.(done);
        const client = fileURLToPath(done.dir);
        await buildWorker(client);
        await compress(client);
      },
    },
  };
}
