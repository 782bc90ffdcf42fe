import type { Hue } from './words';

/** Classes of a hue; written out, so that the style sheet holds them. */
export const PAINT: Record<Hue | 'ink', { bar: string; text: string; wash: string }> = {
  petrol: { bar: 'bg-petrol', text: 'text-petrol', wash: 'bg-petrol-wash' },
  plum: { bar: 'bg-plum', text: 'text-plum', wash: 'bg-plum-wash' },
  rust: { bar: 'bg-rust', text: 'text-rust-ink', wash: 'bg-rust-wash' },
  crimson: { bar: 'bg-crimson', text: 'text-crimson', wash: 'bg-crimson-wash' },
  slate: { bar: 'bg-slate', text: 'text-ink-2', wash: 'bg-slate-wash' },
  ink: { bar: 'bg-ink', text: 'text-ink', wash: 'bg-rule-faint' },
};
