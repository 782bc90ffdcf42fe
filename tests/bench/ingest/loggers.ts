import { WebSocket } from 'ws';
import type { BenchPlant } from './plant';

/** One logger's connection: says hello, then sends what it is given and keeps so many messages unacknowledged. */
export interface BenchLogger {
  roster: number;
  send(message: string): void;
  /** Sends all with at most `window` under way; resolves when the last one is acknowledged. */
  sendAll(messages: readonly string[], window: number): Promise<void>;
  close(): void;
}

export async function connectLogger(
  address: string,
  site: BenchPlant['sites'][number],
): Promise<BenchLogger> {
  const ws = new WebSocket(`${address}/ingest/v1`, {
    headers: { authorization: `Bearer ${site.token}` },
    perMessageDeflate: false,
  });
  let onAck: () => void = () => undefined;
  const roster = await new Promise<number>((resolve, reject) => {
    ws.once('error', reject);
    ws.once('unexpected-response', (_, res) => reject(new Error(`HTTP ${res.statusCode}`)));
    ws.on('open', () =>
      ws.send(
        JSON.stringify({
          type: 'hello',
          protocol: 1,
          logger: site.logger,
          firmware: 'bench',
          clock: Math.floor(Date.now() / 1000),
        }),
      ),
    );
    ws.on('message', (data) => {
      const message = JSON.parse(String(data)) as {
        type: string;
        version?: number;
        field?: string;
        reason?: string;
      };
      if (message.type === 'ack') onAck();
      else if (message.type === 'roster') resolve(message.version ?? 0);
      else if (message.type === 'refused') throw new Error(`refused: ${message.field} ${message.reason}`);
    });
  });
  return {
    roster,
    send: (message) => ws.send(message),
    sendAll: (messages, window) =>
      new Promise((resolve, reject) => {
        let next = 0;
        let acked = 0;
        const lost = () => reject(new Error('the connection was closed'));
        ws.once('close', lost);
        onAck = () => {
          acked++;
          if (next < messages.length) ws.send(messages[next++]!);
          if (acked < messages.length) return;
          ws.off('close', lost);
          resolve();
        };
        while (next < Math.min(window, messages.length)) ws.send(messages[next++]!);
      }),
    close: () => {
      ws.removeAllListeners('close');
      ws.terminate();
    },
  };
}
