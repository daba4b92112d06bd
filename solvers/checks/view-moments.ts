import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import type { XrayGeometry } from '../../shared/domain/geometry/x-ray';
import type { TruthField } from '../truth/truth-field';
import { detectorCentre, directionOf, fanDistances, viewAngles } from '../problems/x-ray/rays';
import { judge, notApplicable, type Check } from './check';
import type { PhantomCheckContext } from './phantom-check';

type XrayContext = PhantomCheckContext<DefinitionOf<'x-ray'>>;

/** Samples a side over the body. */
const samples = 400;

/** Integrals of f and |f| over the disc, by midpoints. */
function massOf(truth: TruthField, radius: number): { mass: number; size: number } {
  let mass = 0;
  let size = 0;
  for (let i = 0; i < samples; i++)
    for (let j = 0; j < samples; j++) {
      const x = ((2 * j + 1) / samples - 1) * radius;
      const y = ((2 * i + 1) / samples - 1) * radius;
      if (x * x + y * y >= radius * radius) continue;
      const value = truth.valueAt(x, y);
      mass += value;
      size += Math.abs(value);
    }
  const area = (4 * radius * radius) / (samples * samples);
  return { mass: mass * area, size: size * area };
}

/** Whether every ray that meets the body ends on the detector. */
function detectorCovers(geometry: XrayGeometry): boolean {
  const half = (geometry.detectors * geometry.detectorSpacing) / 2;
  const { radius } = geometry.body;
  if (geometry.beam === 'parallel') return half >= radius * (1 - 1e-9);
  const { source, detector } = fanDistances(geometry);
  // The outermost ray touches the circle: offset D u / sqrt((D + d)^2 + u^2) = R.
  return half >= ((source + detector) * radius) / Math.sqrt(source * source - radius * radius) - 1e-9 * radius;
}

const reasonTooSmall = 'The detector does not see the whole body, so that its sums say nothing of the whole.';

/** What every view weighs. */
export const totalMassCheck: Check<XrayContext> = {
  key: 'total-mass',
  name: 'Every view has the mass of the body',
  unit: '',
  // Midpoints of eight lines a detector cell, and of the samples in the body.
  bound: 5e-3,
  comparison: 'at-most',
  formula: '\\max_\\theta \\Bigl|\\int p(\\theta, s)\\,ds - \\int f\\Bigr| \\,/\\, \\int |f|',
  summary: 'The integral over the detector of each parallel view is that of the ground truth over the body. Of a fan over a full turn the mean of all views, weighted by the cosine of its rays, is.',
  source: { short: 'Ludwig 1966', full: 'D. Ludwig, The Radon transform on Euclidean space, Comm. Pure Appl. Math. 19 (1966) 49-81 (moment of order 0).', fromMemory: true },
  evaluate({ definition, truth, frame }) {
    const { geometry } = definition;
    const { views, detectors, detectorSpacing, beam, arcDeg } = geometry;
    if (!detectorCovers(geometry)) return notApplicable(this, reasonTooSmall);
    if (beam === 'fan' && arcDeg < 360 - 1e-9) return notApplicable(this, 'A fan over less than a full turn sees some lines once and others twice.');
    const { mass, size } = massOf(truth, geometry.body.radius);
    if (size === 0) return notApplicable(this, 'The ground truth is zero everywhere.');
    let worst = 0;
    let whole = 0;
    for (let view = 0; view < views; view++) {
      let sum = 0;
      for (let cell = 0; cell < detectors; cell++) {
        let step = detectorSpacing;
        if (beam === 'fan') {
          // ds of s = D u / sqrt((D + d)^2 + u^2), and half for each of the two passes of a line.
          const { source, detector } = fanDistances(geometry);
          const u = detectorCentre(geometry, cell);
          const length = (source + detector) * (source + detector);
          step *= (source * length) / Math.sqrt((length + u * u) * (length + u * u) * (length + u * u));
        }
        sum += frame[view * detectors + cell] * step;
      }
      whole += sum / views;
      if (beam === 'parallel') worst = Math.max(worst, Math.abs(sum - mass) / size);
    }
    if (beam === 'fan') worst = Math.abs(whole - mass) / size;
    return judge(this, worst, beam === 'fan' ? 'Mean of all views against the mass of the ground truth.' : 'Largest difference of a view from the mass of the ground truth.');
  },
};

/** Consistency of parallel views with one another. */
export const viewMomentsCheck: Check<XrayContext> = {
  key: 'view-moments',
  name: 'Views agree with one another',
  unit: '',
  bound: 5e-3,
  comparison: 'at-most',
  formula: '\\max_{k = 1, 2}\\; \\min_{c}\\; \\max_\\theta \\Bigl|\\int s^k p(\\theta, s)\\,ds - \\sum_j c_j \\cos^{k-j}\\theta\\, \\sin^j\\theta\\Bigr| \\,/\\, \\Bigl(R^k \\int |f|\\Bigr)',
  summary: 'The first and second moments of the views are homogeneous polynomials of degree 1 and 2 in the cosine and sine of the angle: the conditions on the range of the Radon transform. Fitted by least squares.',
  source: { short: 'Helgason 1965; Ludwig 1966', full: 'S. Helgason, The Radon transform on Euclidean spaces, compact two-point homogeneous spaces and Grassmann manifolds, Acta Math. 113 (1965) 153-180; D. Ludwig, Comm. Pure Appl. Math. 19 (1966) 49-81.', fromMemory: true },
  evaluate({ definition, truth, frame }) {
    const { geometry } = definition;
    const { views, detectors, detectorSpacing, beam, body } = geometry;
    if (beam === 'fan') return notApplicable(this, 'The conditions are stated for parallel beams.');
    if (views < 4) return notApplicable(this, 'Fewer than four views fit any polynomial.');
    if (!detectorCovers(geometry)) return notApplicable(this, reasonTooSmall);
    const { size } = massOf(truth, body.radius);
    if (size === 0) return notApplicable(this, 'The ground truth is zero everywhere.');
    const directions = viewAngles(geometry).map(directionOf);
    let worst = 0;
    for (const order of [1, 2]) {
      const moments = directions.map((_, view) => {
        let sum = 0;
        for (let cell = 0; cell < detectors; cell++) {
          const s = detectorCentre(geometry, cell);
          sum += (order === 1 ? s : s * s) * frame[view * detectors + cell] * detectorSpacing;
        }
        return sum;
      });
      const basis = order === 1 ? [directions.map(([c]) => c), directions.map(([, s]) => s)] : [directions.map(([c]) => c * c), directions.map(([c, s]) => c * s), directions.map(([, s]) => s * s)];
      const scale = (order === 1 ? body.radius : body.radius * body.radius) * size;
      for (const rest of remainder(moments, basis)) worst = Math.max(worst, Math.abs(rest) / scale);
    }
    return judge(this, worst, 'Largest distance of a view\'s first or second moment from the fitted polynomial.');
  },
};

/** What is left of values after the projection on the span of a basis (modified Gram-Schmidt); a direction that depends on the others is left out. */
function remainder(values: readonly number[], basis: readonly (readonly number[])[]): number[] {
  let rest = [...values];
  const found: number[][] = [];
  const inner = (a: readonly number[], b: readonly number[]): number => a.reduce((sum, value, i) => sum + value * b[i], 0);
  for (const direction of basis) {
    let own = [...direction];
    for (const other of found) {
      const share = inner(own, other);
      own = own.map((value, i) => value - share * other[i]);
    }
    const length = Math.sqrt(inner(own, own));
    if (!(length > 1e-8 * Math.sqrt(inner(direction, direction)))) continue;
    const unit = own.map((value) => value / length);
    found.push(unit);
    const share = inner(rest, unit);
    rest = rest.map((value, i) => value - share * unit[i]);
  }
  return rest;
}
