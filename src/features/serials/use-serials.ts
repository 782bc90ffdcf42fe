import { useCallback, useEffect, useMemo, useRef, useState } from 'react';
import { api, ApiError } from '../../lib/api';
import { worthRetrying } from '../../lib/query-client';
import type { AsBuilt, PlacedCounts } from '../../schemas/api/as-built';
import { paths } from '../../schemas/paths';
import { readKept, requestOf, walkStrings, withEntries, type Entry } from './model';
import { serialsUseSerials } from '../../words/serials';

const RETRY_MS = 8000;

type Entered = Pick<Entry, 'string' | 'position' | 'serial' | 'expected' | 'move' | 'reason'>;
/** `from`: where the unit was taken from. */
type Done = Entered & { from: { string: string; position: number } | null };

/** What a person reads, kept on the phone until the server has it, sent in order. */
export function useSerials(initial: AsBuilt, person: string) {
  const site = initial.site.id;
  const shelf = `wakeline:serials:${person}:${site}`;
  const [built, setBuilt] = useState(initial);
  const [entries, setEntries] = useState<Entry[]>([]);
  const [kept, setKept] = useState(false);
  const [sending, setSending] = useState(false);
  const [away, setAway] = useState<string | null>(null);
  /** What can be taken back, newest last. */
  const [done, setDone] = useState<Done[]>([]);
  const busy = useRef(false);

  useEffect(() => {
    // after the first paint: the server has no shelf to look at
    const timer = setTimeout(() => {
      setEntries(readKept(localStorage.getItem(shelf)));
      setKept(true);
    }, 0);
    return () => clearTimeout(timer);
  }, [shelf]);
  useEffect(() => {
    if (!kept) return;
    if (entries.length === 0) localStorage.removeItem(shelf);
    else localStorage.setItem(shelf, JSON.stringify(entries));
  }, [entries, kept, shelf]);

  const strings = useMemo(() => withEntries(walkStrings(built), entries), [built, entries]);
  const waiting = entries.filter((e) => !e.clash);
  const clashes = entries.filter((e) => e.clash);

  const refresh = useCallback(async () => {
    setBuilt(await api<AsBuilt>(paths.api.asBuilt(site)));
  }, [site]);

  const next = waiting[0];
  const send = useCallback(
    async (entry: Entry) => {
      if (busy.current) return;
      busy.current = true;
      setSending(true);
      try {
        await api<PlacedCounts>(paths.api.placements(site), { method: 'POST', body: requestOf(entry) });
        setAway(null);
        setBuilt((b) => settled(b, entry));
        setEntries((list) => list.filter((e) => e.key !== entry.key));
      } catch (error) {
        if (worthRetrying(error) || !(error instanceof ApiError)) {
          setAway(error instanceof Error ? error.message : String(error));
          return;
        }
        if (error.status === 401) {
          setAway(serialsUseSerials.youAreSignedOut);
          return;
        }
        const field = error.fields.find((f) => f.field.startsWith('changes.0.'))?.field.split('.')[2];
        const clash = {
          kind:
            field === 'slot'
              ? ('slot' as const)
              : field === 'serial'
                ? ('serial' as const)
                : ('other' as const),
          message: error.fields[0]?.message ?? error.message,
        };
        setEntries((list) => list.map((e) => (e.key === entry.key ? { ...e, clash } : e)));
        await refresh().catch(() => undefined); // the clash says enough; the list catches up at the next answer
      } finally {
        busy.current = false;
        setSending(false);
      }
    },
    [site, refresh],
  );
  useEffect(() => {
    if (!next || sending || away !== null) return;
    const timer = setTimeout(() => void send(next), 0);
    return () => clearTimeout(timer);
  }, [next, sending, away, send]);
  useEffect(() => {
    if (away === null) return;
    const again = () => setAway(null);
    const timer = setTimeout(again, RETRY_MS);
    window.addEventListener('online', again);
    return () => {
      clearTimeout(timer);
      window.removeEventListener('online', again);
    };
  }, [away]);

  const enter = useCallback((entry: Entered, from: Done['from'] = null) => {
    setEntries((list) => [
      ...list,
      { ...entry, key: crypto.randomUUID(), at: new Date().toISOString(), clash: null },
    ]);
    setDone((d) => [...d.slice(-49), { ...entry, from }]);
  }, []);
  /** Takes the newest back: the slot gets what it had. Gives where that was. */
  const undo = useCallback((): { string: string; position: number } | null => {
    const last = done.at(-1);
    if (!last) return null;
    setDone((d) => d.slice(0, -1));
    setEntries((list) => {
      const unsent = list.findLast(
        (e) => e.string === last.string && e.position === last.position && e.serial === last.serial,
      );
      // what is on its way can't be called back: it is answered by another entry
      if (unsent && !(busy.current && list[0] === unsent)) return list.filter((e) => e !== unsent);
      return [
        ...list,
        {
          key: crypto.randomUUID(),
          string: last.string,
          position: last.position,
          serial: last.expected ?? null,
          expected: last.serial,
          move: false,
          ...(last.from && last.serial !== null ? { also: { ...last.from, serial: last.serial } } : {}),
          reason: serialsUseSerials.takenBackOnSite,
          at: new Date().toISOString(),
          clash: null,
        },
      ];
    });
    return { string: last.string, position: last.position };
  }, [done]);
  const drop = useCallback((key: string) => setEntries((list) => list.filter((e) => e.key !== key)), []);
  /** Puts in what clashed, now that the person knows. */
  const insist = useCallback((key: string, reason: string) => {
    setEntries((list) =>
      list.map((e) => {
        if (e.key !== key || !e.clash) return e;
        const { expected: _seen, ...rest } = e;
        return { ...rest, clash: null, move: true, reason };
      }),
    );
  }, []);

  return {
    strings,
    waiting: waiting.length,
    clashes,
    away,
    canUndo: done.length > 0,
    enter,
    undo,
    drop,
    insist,
    sendNow: () => setAway(null),
  };
}

/** The as-built with an entry that the server has taken. */
function settled(built: AsBuilt, entry: Entry): AsBuilt {
  return {
    ...built,
    strings: built.strings.map((s) => ({
      ...s,
      slots: s.slots.map((slot) => {
        if (s.id === entry.string && slot.position === entry.position)
          return { ...slot, serial: entry.serial };
        if (s.id === entry.also?.string && slot.position === entry.also.position)
          return { ...slot, serial: entry.also.serial };
        return entry.serial !== null && slot.serial === entry.serial ? { ...slot, serial: null } : slot;
      }),
    })),
  };
}
