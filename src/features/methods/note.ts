import type { ReactNode } from 'react';
import type { ExampleKey } from './examples';

/** One judgement, as it is explained to whoever lives with it. Thresholds come from the judgement itself. */
export interface Note {
  key: ExampleKey;
  title: string;
  computes: ReactNode;
  formulas: readonly { label: string; set: ReactNode }[];
  where?: ReactNode;
  sources: readonly string[];
  limits: readonly string[];
}
