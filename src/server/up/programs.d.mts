export function ensurePostgres(wanted?: string): Promise<string>;
export function ensurePgbouncer(): Promise<string>;
export function ensureInflux(): Promise<string>;
export function serverAccount(): { uid: number; gid: number } | null;
export function chromiumAt(): string;
