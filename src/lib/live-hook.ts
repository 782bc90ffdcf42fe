import { useEffect, useRef, useState } from 'react';
import type { Change } from '../schemas/live';
import { liveClient, type ChangeKind, type LiveStatus } from './live';

const BEFORE: LiveStatus = { live: false, since: null, signedOut: false };

/**
 * Listens to a topic of /live while mounted: `fleet`, `site:ID`, `string:ID`, `roll-call:ID`; null: to nothing.
 * `onChange` gets the snapshot first, then each change; it may be a new function at every render.
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
    return liveClient().subscribe(topic, {
      onChange: (change, kind) => handler.current(change, kind),
      onStatus: setStatus,
    });
  }, [topic]);
  return status;
}
