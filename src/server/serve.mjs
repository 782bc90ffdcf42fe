// Runs the built site: `node src/server/serve.mjs`, settings from the environment (see .env.example).
// `npm start` does this for you; use it by itself where PostgreSQL and the process are kept by other means.
import fs from 'node:fs';
import process from 'node:process';
import { fileURLToPath } from 'node:url';

const at = (file) => fileURLToPath(new URL(`../../${file}`, import.meta.url));
if (!fs.existsSync(at('dist/server/entry.mjs'))) {
  process.stderr.write('There is no build. Run "npm run build" first, or "npm start", which does it.\n');
  process.exit(1);
}
if (fs.existsSync(at('.env'))) process.loadEnvFile(at('.env'));
process.env.NODE_ENV ??= 'production';

let running;
let ending = false;
async function end() {
  if (ending) return;
  ending = true;
  const force = setTimeout(() => process.exit(1), 15_000);
  force.unref();
  await running?.stop();
  process.exit(0);
}
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => void end());
// where the site speaks HTTPS, the signal by which certificate programs say that there is a new one
process.on('SIGHUP', () => (running?.reloadCertificate ? running.reloadCertificate() : void end()));
process.on('disconnect', () => void end()); // whoever started us is gone

try {
  const { startServer } = await import('../../dist/server/entry.mjs');
  running = await startServer({ client: at('dist/client/') });
  const { address, port } = running.server.address();
  process.send?.({ listening: { address, port } });
  if (!process.send) process.stdout.write(`listening on ${running.scheme}://${address}:${port}\n`);
} catch (error) {
  process.stderr.write(
    `${error.code === 'EADDRINUSE' ? `The port is taken: ${error.message}` : (error.message ?? error)}\n`,
  );
  process.exit(1);
}
