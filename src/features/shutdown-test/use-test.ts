import { useCallback, useEffect, useMemo, useRef, useState, useSyncExternalStore } from 'react';
import { useQuery } from '@tanstack/react-query';
import {
  withActs,
  type Act,
  type KeptAct,
  type TestRecord,
  type TestRound,
} from '../../domain/commissioning/shutdown-test-record';
import { ApiError, api } from '../../lib/api';
import { newRef } from '../../lib/capture-records';
import { useLive } from '../../lib/live-hook';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { SentAct, ShutdownTestPage } from '../../schemas/api/shutdown-test';
import { KeptActs, type Refused } from './kept';

/** While a round is watched the page asks again so often, ms; otherwise now and then. */
const WATCHING_MS = 1500;
const RESTING_MS = 20_000;
const AGAIN_MS = 3000;

/** Loggers send the last seconds of a round so long after its end, ms. */
const TRICKLES_MS = 60_000;

const underWay = (r: TestRound, nowMs: number): boolean =>
  r.watchStarted !== null && (r.ended === null || nowMs - Date.parse(r.ended.at) < TRICKLES_MS);

export interface TestInHand {
  page: ShutdownTestPage;
  /** With what waits on this phone on top. */
  record: TestRecord;
  waiting: number;
  refused: Refused[];
  /** Why the newest could not be read or sent; null: all is well. */
  problem: ApiError | null;
  /** The server's clock, ms, as this device knows it. */
  now: () => number;
  act: (...acts: Act[]) => void;
  forget: (id: string) => void;
  reload: () => Promise<unknown>;
}

/**
 * A test in this browser: what the server knows, and what was done here and has not reached it. Acts are kept in the
 * browser until they are stored, sent in order, and sent again after a reload or when the network is back.
 */
export function useTest(initial: ShutdownTestPage, person: string): TestInHand {
  const ref = initial.id;
  const client = queryClient();
  const key = useMemo(() => ['shutdown-test', ref], [ref]);
  const [kept] = useState(() => new KeptActs(ref, person));
  const { queue, refused } = useSyncExternalStore(kept.subscribe, kept.get, kept.none);
  const [problem, setProblem] = useState<ApiError | null>(null);
  const [tries, setTries] = useState(0);
  const sending = useRef(false);
  const skew = useRef(0);

  const now = useCallback(() => Date.now() + skew.current, []);
  const heard = useCallback((page: ShutdownTestPage) => {
    skew.current = Date.parse(page.at) - Date.now();
    return page;
  }, []);
  const { data: page, error } = useQuery(
    {
      queryKey: key,
      queryFn: async ({ signal }) =>
        heard(await api<ShutdownTestPage>(paths.api.shutdownTest(ref), { signal })),
      initialData: initial,
      refetchInterval: ({ state }) =>
        state.data?.state === 'draft' && state.data.record.rounds.some((r) => underWay(r, now()))
          ? WATCHING_MS
          : RESTING_MS,
    },
    client,
  );
  const reload = useCallback(() => client.invalidateQueries({ queryKey: key }), [client, key]);
  useLive(`site:${initial.site.id}`, (_change, kind) => {
    if (kind === 'delta') void reload();
  });

  useEffect(() => {
    const online = () => setTries((n) => n + 1);
    window.addEventListener('online', online);
    return () => window.removeEventListener('online', online);
  }, []);

  useEffect(() => {
    if (queue.length === 0 || sending.current) return;
    sending.current = true;
    const batch = queue.slice(0, 50);
    const done = (ids: ReadonlySet<string>) =>
      kept.change((k) => ({ queue: k.queue.filter((a) => !ids.has(a.id)) }));
    let timer: ReturnType<typeof setTimeout> | undefined;
    api<ShutdownTestPage>(paths.api.shutdownTestActs(ref), { method: 'POST', body: { acts: batch } })
      .then(async (next) => {
        // an answer under way may be from before these acts: it would take them off the screen again
        await client.cancelQueries({ queryKey: key });
        setProblem(null);
        client.setQueryData(key, heard(next));
        sending.current = false;
        done(new Set(batch.map((a) => a.id)));
      })
      .catch((e: unknown) => {
        sending.current = false;
        if (!(e instanceof ApiError)) throw e;
        setProblem(e);
        const worth = e.status === 0 || e.status >= 500 || e.status === 401 || e.status === 429;
        if (worth) {
          timer = setTimeout(() => setTries((n) => n + 1), AGAIN_MS);
          return;
        }
        // one act is wrong, or the test is closed: it is shown, never lost unseen
        const index = Number(/acts\.(\d+)/.exec(e.fields[0]?.field ?? '')?.[1] ?? 0);
        const wrong = e.status === 409 ? batch : batch.slice(index, index + 1);
        kept.change((k) => ({ refused: [...k.refused, ...wrong.map((a) => ({ ...a, why: e.message }))] }));
        done(new Set(wrong.map((a) => a.id)));
        void reload();
      });
    return () => clearTimeout(timer);
  }, [queue, tries, ref, key, client, heard, reload, kept]);

  const act = useCallback(
    (...acts: Act[]) => {
      const at = new Date(now()).toISOString();
      kept.change((k) => ({
        queue: [...k.queue, ...acts.map((a): SentAct => ({ id: newRef(), at, act: a }))],
      }));
    },
    [now, kept],
  );
  const forget = useCallback(
    (id: string) => kept.change((k) => ({ refused: k.refused.filter((a) => a.id !== id) })),
    [kept],
  );
  const record = useMemo(
    () =>
      withActs(
        page.record,
        queue.map((a): KeptAct => ({ ...a, recordedAt: a.at, person })),
      ),
    [page.record, queue, person],
  );
  return {
    page,
    record,
    waiting: queue.length,
    refused,
    problem: queue.length > 0 ? problem : error instanceof ApiError ? error : null,
    now,
    act,
    forget,
    reload,
  };
}
