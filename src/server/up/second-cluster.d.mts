export interface SecondServer {
  port: number;
  seconds: number;
  stop(mode?: 'fast' | 'immediate'): Promise<void>;
}
export function makeFolder(folder: string): string;
export function writeFor(file: string, text: string): void;
export function must(program: string, args: string[], options?: object): Promise<number>;
export function reach(url: string): {
  flags: string[];
  database: string;
  options: { env: NodeJS.ProcessEnv };
};
export function baseBackup(
  superUrl: string,
  data: string,
  options?: { wal?: 'stream' | 'none'; standby?: boolean },
): Promise<number>;
export function emptyCluster(data: string, password: string): Promise<void>;
export function startServer(data: string, settings?: Record<string, string | number>): Promise<SecondServer>;
export function stopServer(data: string, mode?: 'fast' | 'immediate'): Promise<void>;
export function atPort(url: string, port: number): string;
