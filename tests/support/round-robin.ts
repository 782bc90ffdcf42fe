import net from 'node:net';
import type { AddressInfo } from 'node:net';

export interface RoundRobin {
  port: number;
  /** Cuts every connection that is open now, some of them with half of a piece still to go. */
  cutAll(): number;
  /** Connections that were made to each backend, by port. */
  made: ReadonlyMap<number, number>;
  close(): Promise<void>;
}

/** A TCP proxy on loopback: each new connection goes to the next backend that answers. */
export async function roundRobin(backends: readonly number[]): Promise<RoundRobin> {
  const open = new Set<{ from: net.Socket; to: net.Socket; cut: boolean }>();
  const made = new Map<number, number>(backends.map((port) => [port, 0]));
  let next = 0;
  const server = net.createServer((from) => {
    from.on('error', () => from.destroy());
    from.pause();
    const attempt = (left: number): void => {
      const port = backends[next++ % backends.length] ?? 0;
      const to = net.connect({ port, host: '127.0.0.1' });
      const failed = (): void => {
        to.destroy();
        if (left > 1 && !from.destroyed) attempt(left - 1);
        else from.destroy();
      };
      to.once('error', failed);
      to.once('connect', () => {
        to.off('error', failed);
        join(from, to);
        made.set(port, (made.get(port) ?? 0) + 1);
      });
    };
    attempt(backends.length);
  });

  function join(from: net.Socket, to: net.Socket): void {
    const pair = { from, to, cut: false };
    open.add(pair);
    const end = (): void => {
      open.delete(pair);
      from.destroy();
      to.destroy();
    };
    for (const socket of [from, to]) socket.on('error', end).on('close', end);
    from.on('data', (piece: Buffer) => {
      if (pair.cut) {
        // the middle of a message, where there is one: the other side sees a connection that broke
        to.write(piece.subarray(0, Math.ceil(piece.length / 2)), end);
        return;
      }
      if (!to.write(piece)) from.pause();
    });
    to.on('drain', () => from.resume());
    to.on('data', (piece: Buffer) => {
      if (!from.write(piece)) to.pause();
    });
    from.on('drain', () => to.resume());
    from.resume();
  }

  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return {
    port: (server.address() as AddressInfo).port,
    made,
    cutAll: () => {
      const pairs = [...open];
      pairs.forEach((pair, i) => {
        if (i % 2 === 0) pair.cut = true;
        else pair.from.destroy();
      });
      // whoever says nothing for a while is cut all the same
      setTimeout(() => {
        for (const pair of pairs) pair.from.destroy();
      }, 2000).unref();
      return pairs.length;
    },
    close: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        for (const { from, to } of open) {
          from.destroy();
          to.destroy();
        }
      }),
  };
}
