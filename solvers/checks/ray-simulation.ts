import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import type { TruthDefinition } from '../../shared/domain/truth-definition';
import { cos, ln, sin } from '../core/math';
import { applySparse } from '../core/sparse';
import { projectOnPixels } from '../problems/pixel-grid/pixel-image';
import { piecesPerCell, projectTruth, rayIntegrals } from '../problems/x-ray/line-integrals';
import { detectorCentre, viewAngles, viewRays, type Ray } from '../problems/x-ray/rays';
import { systemMatrix, xrayCells } from '../problems/x-ray/system-matrix';
import { createTruthField } from '../truth/truth-field';
import { judge, notApplicable, type Check } from './check';
import { commonPractice, type PhantomCheckContext } from './phantom-check';

type XrayContext = PhantomCheckContext<DefinitionOf<'x-ray'>>;

const degree = Math.PI / 180;

/** 2 rho A B sqrt(a^2 - s^2) / a^2 with a^2 = A^2 cos^2 + B^2 sin^2 of the angle between the ray's normal and the first axis. */
function ellipseProjection(g: { value: number; x: number; y: number; semiAxisA: number; semiAxisB: number; angleDeg: number }, ray: Ray): number {
  const c = cos(g.angleDeg * degree);
  const s = sin(g.angleDeg * degree);
  const u = g.semiAxisA * (c * ray.nx + s * ray.ny);
  const v = g.semiAxisB * (c * ray.ny - s * ray.nx);
  const square = u * u + v * v;
  const offset = ray.offset - g.x * ray.nx - g.y * ray.ny;
  return square > offset * offset ? (2 * g.value * g.semiAxisA * g.semiAxisB * Math.sqrt(square - offset * offset)) / square : 0;
}

/** The integration along rays against the projection of ellipses, on the rays of this geometry. */
export const rayClosedFormCheck: Check<XrayContext> = {
  key: 'ray-closed-form',
  name: 'Closed form of ellipses',
  unit: '',
  bound: 1e-11,
  comparison: 'at-most',
  formula: '\\max_i |y_i - y_i^{*}| \\,/\\, \\max_i |y_i^{*}|, \\quad y^{*}(s) = \\frac{2 \\rho A B}{a^2} \\sqrt{a^2 - s^2}, \\; a^2 = A^2 \\cos^2 + B^2 \\sin^2',
  summary: 'The middle lines of all detector cells through two ellipses that lie on one another, by the code that simulates and by the published projection. A phantom of ellipses that add is checked as it is.',
  source: { short: 'Kak and Slaney 1988', full: 'A. C. Kak, M. Slaney, Principles of Computerized Tomographic Imaging, IEEE Press, 1988, equations 3.1 to 3.4.', fromMemory: true },
  evaluate({ definition }) {
    const { geometry, truth } = definition;
    const { radius } = geometry.body;
    const own = truth.kind === 'shapes' && truth.combine === 'add' && truth.shapes.length > 0 ? truth.shapes.flatMap((shape) => (shape.kind === 'ellipse' ? [shape] : [])) : [];
    // A shape that the rim cuts has no closed form here.
    const within = own.every((shape) => Math.sqrt(shape.x * shape.x + shape.y * shape.y) + Math.max(shape.semiAxisA, shape.semiAxisB) <= radius);
    const fits = truth.kind === 'shapes' && own.length > 0 && own.length === truth.shapes.length && within;
    const common = { kind: 'ellipse' as const, target: false, angleDeg: 25 };
    const ellipses = fits ? own : [
      { ...common, label: 'a', value: 1, x: 0.1 * radius, y: -0.2 * radius, semiAxisA: 0.5 * radius, semiAxisB: 0.3 * radius },
      { ...common, label: 'b', value: -0.5, x: 0.2 * radius, y: 0, semiAxisA: 0.2 * radius, semiAxisB: 0.4 * radius },
    ];
    const given: TruthDefinition = { kind: 'shapes', background: 0, combine: 'add', shapes: ellipses };
    const { integral } = rayIntegrals(createTruthField(given), given, geometry);
    let difference = 0;
    let largest = 0;
    for (const angle of viewAngles(geometry)) {
      const rayAt = viewRays(geometry, angle);
      for (let cell = 0; cell < geometry.detectors; cell++) {
        const ray = rayAt(detectorCentre(geometry, cell));
        let exact = 0;
        for (const ellipse of ellipses) exact += ellipseProjection(ellipse, ray);
        difference = Math.max(difference, Math.abs(integral(ray) - exact));
        largest = Math.max(largest, Math.abs(exact));
      }
    }
    if (largest === 0) return notApplicable(this, 'No ray of this geometry meets the ellipses.');
    return judge(this, difference / largest, fits ? 'Largest error of a line integral of this phantom, over the largest of them.' : 'Largest error of a line integral of two ellipses on the rays of this phantom, over the largest of them.');
  },
};

/** What the pieces of the quadrature leave, where there is one. */
export const rayConvergenceCheck: Check<XrayContext> = {
  key: 'ray-convergence',
  name: 'Convergence along the rays',
  unit: '',
  bound: 1e-3,
  comparison: 'at-most',
  formula: '\\|y_h - y_{2h}\\|_\\infty \\,/\\, \\|y_h\\|_\\infty',
  summary: 'Largest change of the simulated data when the pieces of the rule along each ray are twice as long. Shapes and images are integrated exactly. A truth that jumps converges slowly: above the bound it is a warning.',
  source: commonPractice,
  evaluate({ definition, truth, frame }) {
    const coarse = rayIntegrals(truth, definition.truth, definition.geometry, piecesPerCell / 2);
    if (coarse.exact) return notApplicable(this, 'Shapes and images are integrated exactly along each ray.');
    const other = projectTruth(definition.geometry, coarse);
    let difference = 0;
    let largest = 0;
    for (let i = 0; i < frame.length; i++) {
      difference = Math.max(difference, Math.abs(frame[i] - other[i]));
      largest = Math.max(largest, Math.abs(frame[i]));
    }
    const result = judge(this, difference / largest, 'Largest change of a datum with pieces twice as long, over the largest datum.');
    return result.state === 'fail' ? { ...result, state: 'warning' } : result;
  },
};

/** The model that inverts comes closer to the simulation as its cells shrink. */
export const projectorConvergenceCheck: Check<XrayContext> = {
  key: 'projector-convergence',
  name: 'Convergence of the projector',
  unit: '',
  bound: 0.5,
  comparison: 'at-least',
  formula: '\\log_2 \\bigl(\\|A_{2h} P_{2h} f - y\\| \\,/\\, \\|A_h P_h f - y\\|\\bigr)',
  summary: 'Order at which the data of the ground truth, averaged on the cells of the inversion, tend to the simulated ones: from cells twice as large and the cells themselves. Outlines of shapes allow about 1. Below the bound it is a warning: the lines over a detector cell may rule the gap.',
  source: { short: 'Siddon 1985', full: 'R. L. Siddon, Fast calculation of the exact radiological path for a three-dimensional CT array, Med. Phys. 12 (1985) 252-255.', fromMemory: true },
  evaluate({ definition, truth, frame, simulated }) {
    const coarse = { ...definition.geometry, cells: Math.max(2, Math.round(definition.geometry.cells / 2)) };
    const grid = xrayCells(coarse);
    const model = new Float64Array(frame.length);
    applySparse(systemMatrix(coarse, grid), projectOnPixels(truth, grid), model);
    let sum = 0;
    for (let i = 0; i < frame.length; i++) sum += (model[i] - frame[i]) * (model[i] - frame[i]);
    const gap = Math.sqrt(sum) / simulated.noiseScale;
    if (!(simulated.projectionGap > 1e-12)) return notApplicable(this, 'The two models agree to rounding on this ground truth.');
    const result = judge(this, ln(gap / simulated.projectionGap) / ln(2), `The gap falls from ${gap.toPrecision(3)} to ${simulated.projectionGap.toPrecision(3)} of the data.`);
    return result.state === 'fail' ? { ...result, state: 'warning' } : result;
  },
};

/** No inverse crime: the data are not those of the model that inverts. */
export const modelsDifferCheck: Check<XrayContext> = {
  key: 'models-differ',
  name: 'Models differ',
  unit: '',
  bound: 1e-9,
  comparison: 'at-least',
  formula: '\\|A P f - y\\| \\,/\\, \\|y\\|',
  summary: 'Data must not come from the model that inverts them (an inverse crime): rays through the ground truth itself against lengths in cells differ on the ground truth averaged on the cells.',
  source: { short: 'Kaipio and Somersalo 2005', full: 'J. Kaipio, E. Somersalo, Statistical and Computational Inverse Problems, Springer 2005 (inverse crimes).', fromMemory: true },
  evaluate({ simulated }) {
    return judge(this, simulated.projectionGap, 'Gap of the two models on the ground truth averaged on the cells of the inversion, over the norm of the data.');
  },
};
