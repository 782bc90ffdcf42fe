/** @type {import('tailwindcss').Config} */
const token = (name) => `var(--${name})`;
const colours = Object.fromEntries(
  [
    'film',
    'sheet',
    'rule',
    'rule-faint',
    'ink',
    'ink-2',
    'ink-3',
    'petrol',
    'petrol-wash',
    'plum',
    'plum-wash',
    'rust',
    'rust-ink',
    'rust-wash',
    'crimson',
    'crimson-wash',
    'on-crimson',
    'slate',
    'slate-wash',
    'caution-ground',
    'caution-mark',
    'caution-text',
  ].map((name) => [name, token(name)]),
);
export default {
  content: ['./src/**/*.{astro,html,js,jsx,ts,tsx}'],
  darkMode: ['selector', '[data-theme="dark"]'],
  theme: {
    colors: { transparent: 'transparent', current: 'currentColor', ...colours },
    borderRadius: { none: '0', DEFAULT: '2px', md: '3px', full: '9999px' },
    extend: {
      fontFamily: { sans: ['"Inter Tight Variable"', '"Inter Tight"', 'system-ui', 'sans-serif'] },
      fontSize: { xs: ['12px', '16px'], sm: ['13px', '18px'], base: ['14px', '20px'], lg: ['18px', '26px'] },
    },
  },
  plugins: [],
};
