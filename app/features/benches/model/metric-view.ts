import { metrics } from '../../../../solvers/metrics/registry';
import { formatError } from '../../../lib/format';

/** How a metric is printed in a table of this site. */
export interface MetricView {
  key: string;
  name: string;
  /** Table head, and the unit under it. */
  head: string;
  unit: string;
  /** As it stands in a sentence: 'by relative L2'. */
  words: string;
  format: (value: number | null | undefined) => string;
  /** May be ranked by: lower is better. */
  ranked: boolean;
}

/** Lengths in body radii are read as per cent of the diameter, as in the papers of the field. */
const perDiameter = (value: number | null | undefined): string => (value === null || value === undefined ? '\u2013' : (value * 50).toFixed(1));

const standing: Record<string, Partial<MetricView>> = {
  'relative-l2-error': { head: 'Relative L2', words: 'relative L2' },
  'relative-l1-error': { words: 'relative L1' },
  'sup-error': { name: 'L∞', words: 'L∞' },
  'relative-sup-error': { words: 'relative L∞' },
  'position-error': { unit: '% diam.', words: 'position error', format: perDiameter },
  resolution: { head: 'Resol.', unit: '% diam.', words: 'resolution', format: perDiameter },
  'radial-position-difference': { unit: '% diam.', words: 'radial position', format: perDiameter },
  'data-residual-ratio': { unit: 'to noise', words: 'data residual' },
};

export const metricViews: readonly MetricView[] = metrics.map((metric) => ({
  key: metric.key, name: metric.name, head: metric.short, unit: metric.unit, words: metric.short.toLowerCase(), format: formatError, ranked: metric.better === 'lower',
  ...standing[metric.key],
}));

export function metricView(key: string): MetricView {
  return metricViews.find((m) => m.key === key) ?? { key, name: key, head: key, unit: '', words: key, format: formatError, ranked: true };
}
