import type { ChildProcess } from 'node:child_process';

export interface Ended {
  name: string;
  code: number | string | null;
  signal: string | null;
}
export function keepRunning(
  begin: () => ChildProcess,
  options: { name: string; patienceMs?: number; stands?: () => boolean; pauseMs?: number },
  atEnd: (work: () => Promise<unknown>) => void,
): Promise<Ended>;
