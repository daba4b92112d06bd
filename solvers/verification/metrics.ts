import { createEvaluationGrid } from '../core/grid';
import { exp } from '../core/math';
import type { MetricInput, Source } from '../core/types';
import { gridGeometry } from '../metrics/grid-geometry';
import { evaluateMetrics } from '../metrics/registry';
import { digestOf, type VerificationCheck } from './check';

const group = 'Metrics and statistics';

/** 64 x 64 pixels over the unit disc, and an image on them. */
function onDisc(value: (x: number, y: number) => number): { grid: MetricInput['grid']; image: Float64Array } {
  const grid = createEvaluationGrid(1);
  const { x, y } = gridGeometry(grid);
  return { grid, image: Float64Array.from({ length: grid.inside.length }, (_, k) => value(x[k], y[k])) };
}
const values = (metrics: ReturnType<typeof evaluateMetrics>, keys: readonly string[]): Float64Array => Float64Array.from(keys, (key) => metrics[key]?.value ?? NaN);

const trivial: VerificationCheck = {
  key: 'trivial-reconstruction',
  group,
  name: 'Trivial reconstruction',
  line: 'relative L2, L1 and L∞ errors of the background alone',
  published: '1',
  unit: '',
  bound: 0,
  reason: 'Numerator and denominator are the same sums: the quotient is 1 to the last bit.',
  source: { short: 'definition', full: 'The relative errors divide by the distance of the truth to the background, so the background itself has the error 1.' },
  cost: 'light',
  run() {
    const { grid, image: truth } = onDisc((x, y) => (x * x + (y - 0.3) * (y - 0.3) <= 0.04 ? 3 : 1));
    const background = new Float64Array(truth.length).fill(1);
    const errors = values(evaluateMetrics({ truth, background, estimate: background, grid, targets: [], residualNorm: null, noiseNorm: 0 }), ['relative-l2-error', 'relative-l1-error', 'relative-sup-error']);
    const gap = Math.max(...errors.map((v) => Math.abs(v - 1)));
    return { measured: errors[0], gap, digest: digestOf(errors) };
  },
};

const adler: Source = {
  short: 'Adler et al. 2009; numpy 1.24.2',
  full: 'A. Adler et al., figures of merit for linear image reconstruction, Physiol. Meas. 30 (2009) S35-S55 (definitions). Values computed with numpy 1.24.2 for exp(-r²/(2·0.12²)) about (0.4, 0.2), target of radius 0.2.',
  fromMemory: true,
};

function figureOfMerit(metric: string, name: string, published: string, value: number): VerificationCheck {
  return {
    key: `gaussian-image-${metric}`,
    group,
    name,
    line: 'figure of merit of a Gaussian image on 64 × 64 pixels',
    published,
    unit: '',
    bound: 1e-12,
    reason: 'The counts of pixels are exact; sums over 3,228 pixels differ by rounding only.',
    source: adler,
    cost: 'light',
    run() {
      const { grid, image } = onDisc((x, y) => exp(-((x - 0.4) * (x - 0.4) + (y - 0.2) * (y - 0.2)) / (2 * 0.12 * 0.12)));
      const target = { label: 'target', x: 0.4, y: 0.2, area: Math.PI * 0.2 * 0.2, contrast: 1 };
      const [measured] = values(evaluateMetrics({ truth: image, background: new Float64Array(image.length), estimate: image, grid, targets: [target], residualNorm: null, noiseNorm: 0 }), [metric]);
      return { measured, gap: Math.abs(measured - value), digest: digestOf(measured) };
    },
  };
}

export const metricChecks: readonly VerificationCheck[] = [
  trivial,
  figureOfMerit('amplitude-response', 'Amplitude response', '0.719998', 0.7199978098538471),
  figureOfMerit('position-error', 'Position error', '0.001026', 0.0010260407045613847),
  figureOfMerit('resolution', 'Resolution', '0.201451', 0.20145074823714007),
];
