import type { Config } from 'tailwindcss';

const v = (name: string): string => `var(--${name})`;
const solvers = Object.fromEntries([1, 2, 3, 4, 5, 6, 7, 8].map((i) => [`s${i}`, v(`s${i}`)]));

/** Utilities over the tokens of app/styles/tokens.css, so that both themes follow the same variables. */
export default {
  content: ['./index.html', './app/**/*.{ts,tsx}'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      paper: v('paper'),
      sheet: v('sheet'),
      inset: v('inset'),
      ink: { DEFAULT: v('ink'), 2: v('ink-2'), 3: v('ink-3') },
      hair: { DEFAULT: v('hair'), 2: v('hair-2') },
      line: v('line'),
      petrol: { DEFAULT: v('petrol'), strong: v('petrol-strong'), wash: v('petrol-wash'), on: v('on-petrol') },
      amber: { DEFAULT: v('amber'), mark: v('amber-mark'), wash: v('amber-wash') },
      brick: { DEFAULT: v('brick'), mark: v('brick-mark'), wash: v('brick-wash') },
      ...solvers,
    },
    fontFamily: { sans: v('sans'), serif: v('serif'), mono: v('mono') },
    fontSize: {
      micro: v('t-micro'), small: v('t-small'), table: v('t-table'), body: v('t-body'), lead: v('t-lead'),
      h3: v('t-h3'), h2: v('t-h2'), h1: v('t-h1'), display: v('t-display'),
    },
    borderRadius: { none: '0', 1: v('r1'), 2: v('r2'), full: '9999px' },
    screens: { phone: { max: '700px' }, narrow: { max: '900px' }, side: '1240px', wide: '1400px' },
    extend: {
      spacing: { x1: v('x1'), x2: v('x2'), x3: v('x3'), x4: v('x4'), x5: v('x5'), x6: v('x6'), x7: v('x7'), x8: v('x8'), gutter: v('gutter'), margin: v('margin') },
      maxWidth: { page: v('page') },
    },
  },
} satisfies Config;
