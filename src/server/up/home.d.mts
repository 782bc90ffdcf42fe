export function homeOf(kind?: 'demo' | 'test' | 'bench' | 'torture'): string;
