import { useRef, useState } from 'react';
import { api } from '../../lib/api';
import { newRef } from '../../lib/capture-records';
import type { SignOff, SignOffInput } from '../../schemas/api/checks';
import { paths } from '../../schemas/paths';
import type { StringRow } from './rows';

export interface Signing {
  sign: (rows: readonly Pick<StringRow, 'string'>[]) => Promise<void>;
  busy: boolean;
}

/** Signs strings one after the other; one that is refused says why and keeps none of the others back. */
export function useSigning(onDone: () => Promise<unknown>): Signing & { faults: string[] } {
  const [busy, setBusy] = useState(false);
  const [faults, setFaults] = useState<string[]>([]);
  // the same signature sent again after a broken connection is one signature
  const refs = useRef(new Map<string, string>());
  const sign: Signing['sign'] = async (rows) => {
    setBusy(true);
    const refused: string[] = [];
    for (const { string } of rows) {
      const mark = `${string.id} ${string.fingerprint}`;
      const ref = refs.current.get(mark) ?? newRef();
      refs.current.set(mark, ref);
      try {
        const body: SignOffInput = { ref, fingerprint: string.fingerprint };
        await api<SignOff>(paths.api.signOff(string.id), { method: 'POST', body });
      } catch (error) {
        refused.push(`${string.name}: ${error instanceof Error ? error.message : String(error)}`);
      }
    }
    setFaults(refused);
    await onDone();
    setBusy(false);
  };
  return { sign, busy, faults };
}
