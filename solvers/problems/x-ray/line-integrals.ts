import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import type { TruthDefinition } from '../../../shared/domain/truth-definition';
import { gaussLegendre } from '../../core/gauss-legendre';
import type { TruthField } from '../../truth/truth-field';
import { rayBreaks } from './ray-breaks';
import { detectorCentre, viewAngles, viewRays, type Ray } from './rays';
import { halfChord } from './siddon';

/** Lines over the width of a detector cell: where a ray has few pieces, and where it has many. */
const linesOfShapes = 8;
const linesOfFields = 4;
/** Pieces of the rule for expressions to a cell of the inversion, and its points. */
export const piecesPerCell = 4;
const expressionPoints = 3;

export interface RayIntegrals {
  /** Integral of the truth along a ray within the body, in the unit of the truth times m. */
  integral(ray: Ray): number;
  /** Lines averaged over each detector cell. */
  readonly lines: number;
  /** False where pieces of a rule stand for the integral. */
  readonly exact: boolean;
  /** 'closed form', for a reader. */
  readonly kind: string;
}

/**
 * Line integrals of a ground truth. Between the sorted crossings with every outline the truth is constant (ellipses, annuli, polygons:
 * Kak and Slaney 1988, section 3.1), a polynomial (bumps, bilinear arrays) and integrated exactly up to rounding, in whatever order shapes
 * lie on one another. An expression is integrated by three-point Gauss-Legendre rules on pieces of a quarter of a cell of the inversion.
 * @param pieces to a cell, for expressions
 */
export function rayIntegrals(truth: TruthField, definition: TruthDefinition, { body, cells }: XrayGeometry, pieces = piecesPerCell): RayIntegrals {
  const { crossings, points } = rayBreaks(definition);
  const exact = points > 0;
  const { nodes, weights } = gaussLegendre(exact ? points : expressionPoints);
  const piece = (2 * body.radius) / (pieces * cells);
  let breaks = new Float64Array(256);
  let count = 0;
  return {
    exact,
    lines: definition.kind === 'shapes' ? linesOfShapes : linesOfFields,
    kind: definition.kind === 'expression' ? 'Gauss-Legendre quadrature along each ray' : definition.kind === 'array' ? 'exact integrals of the bilinear image along each ray' : 'closed form along each ray',
    integral(ray) {
      const end = halfChord(body.radius, ray);
      if (end === 0) return 0;
      count = 0;
      const add = (t: number): void => {
        if (!(t > -end && t < end)) return;
        if (count + 2 > breaks.length) {
          const longer = new Float64Array(2 * breaks.length);
          longer.set(breaks);
          breaks = longer;
        }
        breaks[count++] = t;
      };
      crossings(ray, add);
      if (!exact) for (let k = 1, n = Math.ceil((2 * end) / piece); k < n; k++) add(-end + (2 * end * k) / n);
      breaks[count++] = end;
      breaks.subarray(0, count).sort();
      const px = ray.nx * ray.offset;
      const py = ray.ny * ray.offset;
      let from = -end;
      let sum = 0;
      for (let k = 0; k < count; k++) {
        const half = 0.5 * (breaks[k] - from);
        const middle = 0.5 * (breaks[k] + from);
        from = breaks[k];
        if (!(half > 0)) continue;
        for (let p = 0; p < nodes.length; p++) {
          const t = middle + half * nodes[p];
          sum += half * weights[p] * truth.valueAt(px - t * ray.ny, py + t * ray.nx);
        }
      }
      return sum;
    },
  };
}

/** Mean line integral over the width of each detector cell, view after view: `lines` rays at the middles of equal parts. */
export function projectTruth(geometry: XrayGeometry, integrals: Pick<RayIntegrals, 'integral' | 'lines'>): Float64Array {
  const { detectors, detectorSpacing } = geometry;
  const { lines } = integrals;
  const out = new Float64Array(geometry.views * detectors);
  let row = 0;
  for (const angle of viewAngles(geometry)) {
    const rayAt = viewRays(geometry, angle);
    for (let cell = 0; cell < detectors; cell++) {
      const centre = detectorCentre(geometry, cell);
      let sum = 0;
      for (let k = 0; k < lines; k++) sum += integrals.integral(rayAt(centre + ((k + 0.5) / lines - 0.5) * detectorSpacing));
      out[row++] = sum / lines;
    }
  }
  return out;
}
