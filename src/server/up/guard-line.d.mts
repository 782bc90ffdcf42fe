export function startGuard(): void;
export function dismissGuard(): void;
