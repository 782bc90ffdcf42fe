import type { AnchorHTMLAttributes, ButtonHTMLAttributes } from 'react';

type Weight = 'primary' | 'plain';
const BASE =
  'target inline-flex items-center justify-center gap-2 rounded border px-4 text-[15px] font-medium leading-5 tracking-[-0.01em] no-underline transition-colors disabled:cursor-not-allowed disabled:opacity-60 aria-disabled:opacity-60';
const WEIGHT: Record<Weight, string> = {
  primary: 'border-ink bg-ink text-sheet hover:border-petrol hover:bg-petrol',
  plain: 'border-rule bg-sheet text-ink hover:border-ink-3',
};

/** A button that says what happens. */
export function Button({
  weight = 'plain',
  className = '',
  type = 'button',
  ...rest
}: ButtonHTMLAttributes<HTMLButtonElement> & { weight?: Weight }) {
  return <button type={type} className={`${BASE} ${WEIGHT[weight]} ${className}`} {...rest} />;
}

/** A link that looks like a button: it goes somewhere or fetches a file. */
export function ButtonLink({
  weight = 'plain',
  className = '',
  ...rest
}: AnchorHTMLAttributes<HTMLAnchorElement> & { weight?: Weight }) {
  return <a className={`${BASE} ${WEIGHT[weight]} ${className}`} {...rest} />;
}
