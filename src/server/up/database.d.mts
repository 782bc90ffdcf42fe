export function checkGiven(url: string): Promise<void>;
export function migrate(url: string, options?: { unlock?: boolean }): Promise<void>;
export function roleAddresses(
  ownerUrl: string,
  secret: string,
): Promise<{ appUrl: string; ingestUrl: string; oneRole: boolean }>;
