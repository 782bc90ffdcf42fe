export function isAlive(pid: number, born?: string): boolean;
export function bornAt(pid: number): string;
export function freePort(port: number, host?: string): Promise<number>;
export function listenerOf(port: number): string;
