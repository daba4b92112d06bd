import type { DefinitionOf } from '../../../shared/domain/phantom-definition';
import { bodyContains } from '../../core/grid';
import { norm2 } from '../../core/vector';
import { requireInOutline } from '../../truth/check-in-body';
import { createTruthField, type TruthField } from '../../truth/truth-field';
import { truthOnGrid } from '../../truth/truth-on-grid';
import { TruthError } from '../../truth/truth-error';
import { plainRange } from '../../truth/value-range';
import type { InversionProblem, SimulatedData } from '../problem-family';
import { blurField, simulateBlur } from './simulation';

/** The sharp picture, of any sign, also beyond the frame. @throws TruthError where a shape lies outside the picture or fills it */
export function pictureTruth({ truth, geometry }: Pick<DefinitionOf<'deblurring'>, 'truth' | 'geometry'>, arrayValues?: Float64Array): TruthField {
  if (truth.kind === 'shapes') {
    const { width, height } = geometry.body;
    requireInOutline(truth, bodyContains(geometry.body), Math.max(width, height) / 2, (i) => createTruthField({ ...truth, shapes: [truth.shapes[i]] }));
  }
  return createTruthField(truth, arrayValues, plainRange());
}

function gap(a: Float64Array, b: Float64Array): number {
  const difference = new Float64Array(a.length);
  for (let i = 0; i < a.length; i++) difference[i] = a[i] - b[i];
  return norm2(difference);
}

/**
 * The blurred picture from a larger and finer field, so that light from beyond the frame is in the data whatever the inversion assumes.
 * @throws TruthError where the truth has no admissible values or gives no light
 */
export function simulateDeblurring(definition: DefinitionOf<'deblurring'>, arrayValues: Float64Array | undefined, problem: InversionProblem): SimulatedData {
  const { geometry } = definition;
  const truth = pictureTruth(definition, arrayValues);
  const truthImage = truthOnGrid(truth, problem.grid);
  const field = blurField(geometry);
  const clean = simulateBlur(truth, geometry, field);
  const noiseScale = norm2(clean);
  if (!(noiseScale > 0)) throw new TruthError('The blurred picture is zero everywhere, so noise relative to it is not defined.', ['truth']);
  const { background } = truth;
  // A constant stays what it is: the point-spread function has unit integral.
  const reference = new Float64Array(clean.length).fill(background);
  const modelGap = gap(problem.evaluate(problem.project(truth)), clean) / noiseScale;
  return {
    clean,
    frame: clean,
    reference,
    noiseScale,
    truthImage,
    backgroundImage: new Float64Array(truthImage.length).fill(background),
    grid: problem.grid,
    truth,
    targets: truth.targets,
    modelErrorFloor: modelGap,
    backgroundGap: background === 0 ? 0 : gap(problem.evaluate(problem.background()), reference) / norm2(reference),
    projectionGap: modelGap,
    unknowns: field.grid.nx * field.grid.ny,
    elements: field.grid.nx * field.grid.ny,
    cells: problem.unknowns,
    nodes: problem.nodes,
    kind: `blur of a larger field, ${field.samples} x ${field.samples} samples a pixel, exact response of each pixel`,
  };
}
