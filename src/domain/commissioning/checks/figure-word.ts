import type { Figures } from './definition';

/** What figures say of a pass: `blocks` when they contradict it. */
export interface FigureWord {
  weight: 'blocks' | 'told';
  words: string;
  remedy: string | null;
  source: string;
  fireRisk?: boolean;
}

export const numberOf = (figures: Figures, key: string): number | null => {
  const value = Object.hasOwn(figures, key) ? figures[key] : undefined;
  return typeof value === 'number' ? value : null;
};
export const wordOf = (figures: Figures, key: string): string | null => {
  const value = Object.hasOwn(figures, key) ? figures[key] : undefined;
  return typeof value === 'string' ? value : null;
};

/** A figure in a sentence: at most three decimals, a real minus sign. */
export const written = (n: number): string => String(Number(n.toFixed(3))).replace('-', '−');
