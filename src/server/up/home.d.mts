export function homeOf(kind?: 'demo' | 'test' | 'bench'): string;
