import type { Page, WebSocketRoute } from 'playwright-core';
import type { Change, LiveMessage } from '../../../src/schemas/live';

/** A page's /live in the bench's hands: what the server says goes through, and a stream of changes comes on top. */
export interface Stream {
  /** Sends one change of the topic after the other, `perSecond`, until stopped. Gives how many were sent. */
  start(perSecond: number): () => number;
  /** Resolves when the topic's snapshot has been given to the page. */
  begun: Promise<void>;
}

type Things = Record<string, unknown>[];
const LISTS = ['sites', 'strings', 'inverters'] as const;

const MEASURED = /power|voltage|current|energy/i;
/** The same thing a moment later: what is measured has moved by up to a hundredth. */
function moved(thing: Record<string, unknown>, step: number): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(thing).map(([key, value]) => [
      key,
      typeof value === 'number' && MEASURED.test(key) ? value * (1 + ((step % 21) - 10) / 1000) : value,
    ]),
  );
}

/** A list made longer by copies with identifiers and names of their own: a fleet or a site of the size that is meant. */
function grown(list: Things, size: number): Things {
  if (list.length === 0) return list;
  return Array.from({ length: Math.max(size, list.length) }, (_, k) => {
    const thing = list[k % list.length] ?? {};
    if (k < list.length) return thing;
    const id = `00000000-0000-4000-8000-${k.toString(16).padStart(12, '0')}`;
    return { ...thing, id, name: `${String(thing.name)} ${k}` };
  });
}

/** Stands between a page and its /live; `size`: so many sites or strings in its topic. Before the page is opened. */
export async function streamOf(page: Page, topic: RegExp, size: number): Promise<Stream> {
  let socket: WebSocketRoute | undefined;
  let last: LiveMessage | undefined;
  let key: (typeof LISTS)[number] | undefined;
  let things: Things = [];
  let begin: () => void = () => undefined;
  const begun = new Promise<void>((resolve) => (begin = resolve));
  await page.routeWebSocket(/\/live$/, (ws) => {
    const server = ws.connectToServer();
    socket = ws;
    ws.onMessage((said) => server.send(said));
    server.onMessage((said) => {
      const message = JSON.parse(String(said)) as LiveMessage;
      if (message.type !== 'snapshot' || !topic.test(message.topic)) return ws.send(said);
      last = message;
      key = LISTS.find((name) => (message.change[name]?.length ?? 0) > 0);
      if (key) things = grown(message.change[key] as unknown as Things, size);
      ws.send(
        JSON.stringify({ ...message, change: key ? { ...message.change, [key]: things } : message.change }),
      );
      begin();
    });
  });
  return {
    begun,
    start: (perSecond) => {
      let sent = 0;
      const timer = setInterval(() => {
        const thing = things[(sent * 7) % things.length];
        if (!socket || !last || last.type === 'refused' || !key || !thing) return;
        const change = { [key]: [moved(thing, sent)] } as unknown as Change;
        socket.send(JSON.stringify({ type: 'delta', topic: last.topic, cursor: last.cursor, change }));
        sent++;
      }, 1000 / perSecond);
      return () => {
        clearInterval(timer);
        return sent;
      };
    },
  };
}
