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

/** Lengths are stored and defined in body radii and printed as per cent of the radius, on every page. */
const perRadius = (value: number | null | undefined): string => (value === null || value === undefined ? '\u2013' : (value * 100).toFixed(1));

const standing: Record<string, Partial<MetricView>> = {
  'relative-l2-error': { head: 'Relative L2', words: 'relative L2' },
  'relative-l1-error': { words: 'relative L1' },
  'sup-error': { name: 'L∞', words: 'L∞', unit: '' },
  'relative-sup-error': { words: 'relative L∞' },
  'position-error': { unit: '% radius', words: 'position error', format: perRadius },
  resolution: { head: 'Resol.', unit: '% radius', words: 'resolution', format: perRadius },
  'radial-position-difference': { unit: '% radius', words: 'radial position', format: perRadius },
  'data-residual-ratio': { unit: 'to noise', words: 'data residual' },
};

export const metricViews: readonly MetricView[] = metrics.map((metric) => ({
  key: metric.key, name: metric.name, head: metric.short, unit: metric.unit, words: metric.short.toLowerCase(), format: formatError, ranked: metric.better === 'lower',
  ...standing[metric.key],
}));

export function metricView(key: string): MetricView {
  return metricViews.find((m) => m.key === key) ?? { key, name: key, head: key, unit: '', words: key, format: formatError, ranked: true };
}
