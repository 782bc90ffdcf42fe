import { useState } from 'react';
import { api, ApiError, type Call } from '../../lib/api';

export interface Sending<R> {
  busy: boolean;
  fault: ApiError | null;
  /** @returns whether it was taken, with the answer; where it was refused see `fault` */
  send: (path: string, call: Call) => Promise<{ taken: true; answer: R } | { taken: false }>;
}

/** One form's way to the API: busy while it runs, what was wrong afterwards. */
export function useSending<R = undefined>(): Sending<R> {
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<ApiError | null>(null);
  return {
    busy,
    fault,
    send: async (path, call) => {
      setBusy(true);
      setFault(null);
      try {
        return { taken: true, answer: await api<R>(path, call) };
      } catch (error) {
        if (!(error instanceof ApiError)) throw error;
        setFault(error);
        return { taken: false };
      } finally {
        setBusy(false);
      }
    },
  };
}
