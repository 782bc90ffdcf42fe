import { useEffect, useRef, useState } from 'react';
import type { Change } from '../schemas/live';
import { Gather } from './gather';
import { liveClient, type ChangeKind, type LiveStatus } from './live';

/** A page that hears much draws itself this often at most, ms. */
const EVERY_MS = 200;
const BEFORE: LiveStatus = { live: false, since: null, signedOut: false };

/**
 * Listens to a topic of /live while mounted: `fleet`, `site:ID`, `string:ID`, `roll-call:ID`; null: to nothing.
 * `onChange` gets the snapshot first, then each change, those of 200 ms in one go; it may be a new function at every
 * render.
 * "Not live since …" is `!status.live && status.since`.
 */
export function useLive(
  topic: string | null,
  onChange: (change: Change, kind: ChangeKind) => void,
): LiveStatus {
  const [status, setStatus] = useState<LiveStatus>(BEFORE);
  const handler = useRef(onChange);
  useEffect(() => {
    handler.current = onChange;
  });
  useEffect(() => {
    if (topic === null) return;
    const gather = new Gather<[Change, ChangeKind]>((news) => {
      for (const [change, kind] of news) handler.current(change, kind);
    }, EVERY_MS);
    const leave = liveClient().subscribe(topic, {
      onChange: (change, kind) => gather.push([change, kind]),
      onStatus: setStatus,
    });
    return () => {
      leave();
      gather.stop();
    };
  }, [topic]);
  return status;
}
