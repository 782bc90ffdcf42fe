import type { ChildProcess, SpawnOptions } from 'node:child_process';

export function launch(program: string, args: string[], options?: SpawnOptions): ChildProcess;
export function end(child: ChildProcess, patienceMs?: number): Promise<void>;
export function isAlive(pid: number, born?: string): boolean;
export function bornAt(pid: number): string;
export function freePort(port: number, host?: string): Promise<number>;
export function listenerOf(port: number): string;
