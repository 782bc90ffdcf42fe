export function sourcesHash(): string;
export function buildIfStale(): Promise<void>;
