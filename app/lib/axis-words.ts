/** How the levels of a run or bench are read: the noise itself, or another axis at a fixed noise. */
import { axisWords, type AxisSetting } from '../../shared/domain/axes';
import { formatPercent, percentDigits } from './format';

export interface AxisView {
  readonly key: AxisSetting['key'];
  readonly isNoise: boolean;
  /** Head of a column: 'Noise', 'Contrast'. */
  readonly head: string;
  /** Under an axis of a chart, and in 'error against …'. */
  readonly label: string;
  /** A level in its unit. */
  readonly format: (level: number) => string;
  /** Digits and unit apart. */
  readonly digits: (level: number) => string;
  readonly unit: '%' | '';
  /** After 'at': '1 % noise', 'contrast 1.5', '2 % misplaced electrodes'. */
  readonly at: (level: number) => string;
  /** What goes up the ladder, after a number: 'noise levels'. */
  readonly levels: string;
  /** The noise of a level: itself, or the fixed one. */
  readonly noiseAt: (level: number) => number;
  /** Said once on a page; null where the noise is what varies. */
  readonly fixed: string | null;
  /** What a level means. */
  readonly line: string;
}

const plainFactor = (level: number): string => String(Number(level.toPrecision(3)));

export function axisView(setting: AxisSetting = { key: 'noise' }): AxisView {
  const words = axisWords[setting.key];
  const isNoise = setting.key === 'noise';
  const name = words.name.toLowerCase();
  const share = words.print === 'share';
  const format = share ? formatPercent : plainFactor;
  return {
    key: setting.key, isNoise, head: words.name, label: isNoise ? 'relative noise' : name, format, digits: share ? percentDigits : plainFactor, unit: share ? '%' : '',
    at: (level) => (share ? `${format(level)} ${name}` : `${name} ${format(level)}`),
    levels: isNoise ? 'noise levels' : `levels of ${name}`,
    noiseAt: (level) => (setting.key === 'noise' ? level : setting.noise),
    fixed: setting.key === 'noise' ? null : `${formatPercent(setting.noise)} noise throughout`,
    line: words.line,
  };
}

/** An axis as a fact in lists: nothing for the noise. */
export const axisFact = (setting: AxisSetting): string | null => (setting.key === 'noise' ? null : `${axisWords[setting.key].name}, at ${formatPercent(setting.noise)} noise`);
