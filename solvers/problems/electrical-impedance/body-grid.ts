import { evaluationGrid } from '../../core/grid';
import type { EvaluationGrid } from '../../core/types';
import { bodyCurve, isDisc, type ImpedanceBody } from './body-curve';

const samples = 720;

/**
 * The evaluation grid of a body with electrodes: n x n pixels over the square about the origin that encloses it. `bodyRadius` is half its
 * side.
 */
export function bodyGrid(geometry: { readonly body: ImpedanceBody }, n = 64): EvaluationGrid {
  const { body } = geometry;
  let half = body.radius;
  if (!isDisc(body)) {
    const curve = bodyCurve(geometry);
    half = 0;
    for (let i = 0; i < samples; i++) {
      const { x, y } = curve.point((2 * Math.PI * i) / samples);
      half = Math.max(half, Math.abs(x), Math.abs(y));
    }
  }
  return evaluationGrid({ nx: n, ny: n, xMin: -half, xMax: half, yMin: -half, yMax: half, body: isDisc(body) ? { kind: 'disc', radius: body.radius } : body });
}
