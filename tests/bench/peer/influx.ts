import fs from 'node:fs';
import path from 'node:path';
import { end, freePort, launch } from '../../../src/server/up/processes.mjs';
import { ensureInflux } from '../../../src/server/up/programs.mjs';
import type { BenchPlant } from '../ingest/plant';
import { readingOf } from '../ingest/readings';

/** Debian's InfluxDB 1.6 in a process and a folder of its own on loopback, spoken to by HTTP, its one interface. */
export interface Peer {
  /** Writes a body of line protocol, times in seconds; resolves once it is durable. */
  write(lines: string): Promise<void>;
  /** Writes all, so many at a time. */
  writeAll(bodies: readonly string[], atOnce: number): Promise<void>;
  /** Rows of a question's only series: [time, …values]. */
  ask(question: string): Promise<(number | null)[][]>;
  stop(): Promise<void>;
}

const DATABASE = 'readings';

const settings = (folder: string, ports: { http: number; rpc: number }): string => `
reporting-disabled = true
bind-address = "127.0.0.1:${ports.rpc}"
[meta]
  dir = "${folder}/meta"
[data]
  dir = "${folder}/data"
  wal-dir = "${folder}/wal"
  wal-fsync-delay = "0s" # each write is on disk before it is answered
  query-log-enabled = false
[coordinator]
  write-timeout = "120s" # a busy disk is waited for, on both sides
[monitor]
  store-enabled = false
[http]
  bind-address = "127.0.0.1:${ports.http}"
  log-enabled = false
[logging]
  level = "error"
`;

export async function startPeer(folder: string): Promise<Peer> {
  const program = await ensureInflux();
  const ports = { http: await freePort(0), rpc: await freePort(0) };
  const file = path.join(folder, 'influxdb.conf');
  fs.writeFileSync(file, settings(folder, ports));
  const child = launch(program, ['-config', file], { cwd: folder });
  let said = '';
  for (const stream of [child.stdout, child.stderr])
    stream?.setEncoding('utf8').on('data', (chunk: string) => (said = (said + chunk).slice(-4000)));
  const at = `http://127.0.0.1:${ports.http}`;
  for (let i = 0; ; i++) {
    const answers = await fetch(`${at}/ping`).then(
      () => true,
      () => false,
    );
    if (answers) break;
    if (i > 300 || child.exitCode !== null) throw new Error(`InfluxDB does not answer:\n${said}`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  const checked = async (response: Response): Promise<string> => {
    const text = await response.text();
    if (!response.ok || text.includes('"error"'))
      throw new Error(`InfluxDB says ${response.status}: ${text}`);
    return text;
  };
  const query = async (q: string, method = 'GET'): Promise<string> =>
    checked(
      await fetch(`${at}/query?${new URLSearchParams({ db: DATABASE, epoch: 's', q }).toString()}`, {
        method,
      }),
    );
  await query(`create database ${DATABASE}`, 'POST');
  const write = async (body: string): Promise<void> =>
    void (await checked(await fetch(`${at}/write?db=${DATABASE}&precision=s`, { method: 'POST', body })));
  return {
    write,
    writeAll: async (bodies, atOnce) => {
      let next = 0;
      const one = async (): Promise<void> => {
        for (let body = bodies[next++]; body !== undefined; body = bodies[next++]) await write(body);
      };
      await Promise.all(Array.from({ length: atOnce }, one));
    },
    ask: async (q) => {
      const { results } = JSON.parse(await query(q)) as {
        results: { series?: { values: (number | null)[][] }[] }[];
      };
      return results[0]?.series?.[0]?.values ?? [];
    },
    stop: () => end(child),
  };
}

/** The readings that `framesMessage` makes of some sites' minutes, a line a unit, in bodies of so many lines. */
export function lineBodies(
  plant: BenchPlant,
  span: { sites: readonly number[]; from: number; to: number; startS: number },
  linesABody: number,
): string[] {
  const bodies: string[] = [];
  let lines: string[] = [];
  for (let minute = span.from; minute < span.to; minute++)
    for (const site of span.sites)
      for (let s = 0; s < plant.stringsPerSite; s++)
        for (let u = 0; u < plant.unitsPerString; u++) {
          const unit = (site * plant.stringsPerSite + s) * plant.unitsPerString + u;
          const r = readingOf(unit, minute);
          const id = plant.sites[site]?.strings[s]?.id ?? 0;
          lines.push(
            `unit,string=${id},position=${u + 1} voltage=${r.voltage}i,current=${r.current}i,temperature=${r.temperature}i,signal=${r.signal}i,via=${r.via}i,state=${r.state}i ${span.startS + 60 * minute}`,
          );
          if (lines.length < linesABody) continue;
          bodies.push(lines.join('\n'));
          lines = [];
        }
  if (lines.length > 0) bodies.push(lines.join('\n'));
  return bodies;
}
