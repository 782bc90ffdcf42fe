import { createElement, type ReactNode } from 'react';
import { methodsMath } from '../../words/methods';

/** Formulas as MathML: set by the browser, read by screen readers. */

const make = (tag: string, ...children: ReactNode[]): ReactNode => createElement(tag, null, ...children);

/** A variable. */
export const v = (name: string): ReactNode => make('mi', name);
/** A word or a unit, upright. */
export const word = (text: string): ReactNode => make('mtext', text);
/** A number. */
export const n = (value: number | string): ReactNode => make('mn', String(value).replace('-', '−'));
/** An operator. */
export const op = (sign: string): ReactNode => make('mo', sign);
export const row = (...parts: ReactNode[]): ReactNode => make('mrow', ...parts);
export const frac = (above: ReactNode, below: ReactNode): ReactNode => make('mfrac', above, below);
export const sub = (base: ReactNode, index: ReactNode): ReactNode => make('msub', base, index);
export const sup = (base: ReactNode, power: ReactNode): ReactNode => make('msup', base, power);
export const sum = (over: ReactNode): ReactNode => make('munder', op('∑'), over);
export const brackets = (...parts: ReactNode[]): ReactNode => row(op('('), ...parts, op(')'));

/** One formula on a line of its own; wide ones scroll by themselves on a phone. */
export function Formula({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div
      role="group"
      aria-label={methodsMath.formulaLabel(label)}
      tabIndex={0}
      className="overflow-x-auto py-1.5 text-[17px] leading-7"
    >
      {createElement(
        'math',
        { display: 'block', style: { width: 'max-content', minWidth: 0, margin: 0 } },
        children,
      )}
    </div>
  );
}
