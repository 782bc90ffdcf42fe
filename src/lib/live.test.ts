import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { CLOSE_COME_BACK, CLOSE_SIGNED_OUT } from '../schemas/live';
import {
  BACK_OFF_MS,
  backOffMs,
  COME_BACK,
  LiveClient,
  SIGNED_OUT,
  type LiveStatus,
  type Socket,
} from './live';

class FakeSocket implements Socket {
  readyState = 0;
  onopen: Socket['onopen'] = null;
  onmessage: Socket['onmessage'] = null;
  onclose: Socket['onclose'] = null;
  sent: unknown[] = [];
  send(data: string): void {
    this.sent.push(JSON.parse(data));
  }
  close(): void {
    this.readyState = 3;
  }
  opens(): void {
    this.readyState = 1;
    this.onopen?.();
  }
  says(message: object): void {
    this.onmessage?.({ data: JSON.stringify(message) });
  }
  ends(code: number): void {
    this.readyState = 3;
    this.onclose?.({ code });
  }
}

const word = { type: 'delta', topic: 'fleet', cursor: '1', change: {} };
const sockets: FakeSocket[] = [];
const returned = vi.fn();
const client = () =>
  new LiveClient({
    open: () => {
      const socket = new FakeSocket();
      sockets.push(socket);
      return socket;
    },
    random: () => 1,
  });
const socket = (): FakeSocket => {
  const last = sockets.at(-1);
  if (!last) throw new Error('no socket was opened');
  return last;
};

beforeEach(() => {
  sockets.length = 0;
  vi.useFakeTimers();
  returned.mockClear();
  vi.stubGlobal('dispatchEvent', (event: Event) => returned(event.type));
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

describe('the live client', () => {
  it('knows the close codes of the schema', () => {
    expect([COME_BACK, SIGNED_OUT]).toEqual([CLOSE_COME_BACK, CLOSE_SIGNED_OUT]);
  });

  it('hands each topic to its own subscribers and comes back with the cursor', () => {
    const live = client();
    const fleet = vi.fn();
    const site = vi.fn();
    live.subscribe('fleet', { onChange: fleet });
    live.subscribe('site:1', { onChange: site });
    socket().opens();
    expect(socket().sent).toEqual([
      { type: 'subscribe', topic: 'fleet' },
      { type: 'subscribe', topic: 'site:1' },
    ]);
    socket().says({ type: 'snapshot', topic: 'fleet', cursor: '41', change: { sites: [] } });
    socket().says({ type: 'delta', topic: 'site:1', cursor: '44', change: { events: [] } });
    expect(fleet.mock.calls).toEqual([[{ sites: [] }, 'snapshot']]);
    expect(site.mock.calls).toEqual([[{ events: [] }, 'delta']]);
    socket().ends(1006);
    vi.advanceTimersByTime(BACK_OFF_MS.first);
    socket().opens();
    expect(sockets).toHaveLength(2);
    expect(socket().sent).toEqual([
      { type: 'subscribe', topic: 'fleet', cursor: '41' },
      { type: 'subscribe', topic: 'site:1', cursor: '44' },
    ]);
  });

  it('says since when it is not live, and that it is again', () => {
    const live = client();
    const seen: LiveStatus[] = [];
    live.subscribe('fleet', { onChange: () => undefined, onStatus: (s) => seen.push(s) });
    vi.setSystemTime(1000);
    socket().opens();
    socket().says(word);
    vi.setSystemTime(5000);
    socket().ends(1001);
    vi.setSystemTime(9000);
    vi.advanceTimersByTime(BACK_OFF_MS.first);
    socket().opens();
    socket().says(word);
    expect(seen.map((s) => [s.live, s.since?.getTime() ?? null])).toEqual([
      [false, null],
      [true, 1000],
      [false, 5000],
      [true, 9000 + BACK_OFF_MS.first],
    ]);
  });

  it('takes silence for a dead connection, and a word without content for life', () => {
    const live = client();
    const change = vi.fn();
    live.subscribe('fleet', { onChange: change });
    socket().opens();
    for (let i = 0; i < 5; i++) {
      vi.advanceTimersByTime(40_000);
      socket().says({ type: 'delta', topic: 'fleet', cursor: '1', change: {} });
    }
    expect(sockets).toHaveLength(1);
    expect(change).not.toHaveBeenCalled();
    vi.advanceTimersByTime(60_000);
    expect(sockets.length).toBeGreaterThan(1);
  });

  it('is not live while nothing comes, keeps the connection for a while, and tells when it is live again', () => {
    const live = client();
    const seen: boolean[] = [];
    live.subscribe('fleet', { onChange: () => undefined, onStatus: (s) => seen.push(s.live) });
    socket().opens();
    // open, but the server has read nothing yet
    expect(seen).toEqual([false]);
    socket().says(word);
    vi.advanceTimersByTime(11_000);
    expect(seen).toEqual([false, true]);
    vi.advanceTimersByTime(2000);
    expect(seen).toEqual([false, true, false]);
    expect(returned).not.toHaveBeenCalled();
    socket().says(word);
    expect(seen).toEqual([false, true, false, true]);
    expect(returned.mock.calls).toEqual([['online']]);
    expect(sockets).toHaveLength(1);
  });

  it('stops trying when the session has ended', () => {
    const live = client();
    const seen: LiveStatus[] = [];
    live.subscribe('fleet', { onChange: () => undefined, onStatus: (s) => seen.push(s) });
    socket().opens();
    socket().ends(SIGNED_OUT);
    vi.advanceTimersByTime(10 * BACK_OFF_MS.max);
    expect(sockets).toHaveLength(1);
    expect(seen.at(-1)).toMatchObject({ live: false, signedOut: true });
  });

  it('unsubscribes, and lets go of the socket when nobody listens', () => {
    const live = client();
    const first = live.subscribe('fleet', { onChange: () => undefined });
    const second = live.subscribe('site:1', { onChange: () => undefined });
    socket().opens();
    first();
    expect(socket().sent.at(-1)).toEqual({ type: 'unsubscribe', topic: 'fleet' });
    second();
    expect(socket().readyState).toBe(3);
    vi.advanceTimersByTime(10 * BACK_OFF_MS.max);
    expect(sockets).toHaveLength(1);
  });

  it('waits longer each time, up to a limit, and never in step with others', () => {
    expect([0, 1, 2, 3].map((n) => backOffMs(n, 1))).toEqual([500, 1000, 2000, 4000]);
    expect(backOffMs(50, 1)).toBe(BACK_OFF_MS.max);
    expect(backOffMs(3, 0.25)).toBe(1000);
  });
});
