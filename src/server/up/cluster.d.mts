export interface Cluster {
  home: string;
  state: {
    port: number;
    superPassword: string;
    rolesSecret: string;
    demoSecret: string;
    seed: 'none' | 'running' | 'done';
  };
  /** Address of the owner's database. */
  url: string;
  stop(): Promise<void>;
}
export function startCluster(home: string, options?: { durable?: boolean }): Promise<Cluster>;
export function leaveCluster(home: string, user: string): Promise<void>;
export function postmasterOf(
  home: string,
): { pid: number; port: number; alive: boolean; ours: boolean } | null;
