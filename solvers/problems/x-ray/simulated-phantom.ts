import type { DefinitionOf } from '../../../shared/domain/phantom-definition';
import { norm2 } from '../../core/vector';
import { requireInBody } from '../../truth/check-in-body';
import { createTruthField } from '../../truth/truth-field';
import { truthOnGrid } from '../../truth/truth-on-grid';
import { plainRange } from '../../truth/value-range';
import type { InversionProblem, SimulatedData } from '../problem-family';
import { projectTruth, rayIntegrals } from './line-integrals';
import { halfChord } from './siddon';

function gap(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += (a[i] - b[i]) * (a[i] - b[i]);
  return Math.sqrt(sum);
}

/**
 * Line integrals of the truth, averaged over the width of each detector cell (eight lines through shapes, four through an image or an
 * expression; the model that inverts has two), and the gap to that model.
 * @throws RangeError (TruthError where a field of the truth is at fault) for what cannot be simulated
 */
export function simulateXrayPhantom(definition: DefinitionOf<'x-ray'>, arrayValues: Float64Array | undefined, problem: InversionProblem): SimulatedData {
  const { truth: given, geometry } = definition;
  const truth = createTruthField(given, arrayValues, plainRange(' 1/m'));
  if (given.kind === 'shapes')
    requireInBody(given, geometry.body.radius, (i) => createTruthField({ kind: 'shapes', background: given.background, shapes: [given.shapes[i]] }));
  const { grid } = problem;
  const truthImage = truthOnGrid(truth, grid);
  const integrals = rayIntegrals(truth, given, geometry);
  const frame = projectTruth(geometry, integrals);
  const reference = projectTruth(geometry, { lines: integrals.lines, integral: (ray) => 2 * halfChord(geometry.body.radius, ray) * given.background });
  const noiseScale = norm2(frame);
  if (!(noiseScale > 0)) throw new RangeError('All line integrals are zero, so there is nothing that noise could be relative to: let rays meet a shape, or give the background a value.');
  const background = norm2(reference);
  const projectionGap = gap(problem.evaluate(problem.project(truth)), frame) / noiseScale;
  return {
    clean: frame, frame, reference, noiseScale, truthImage, backgroundImage: new Float64Array(truthImage.length).fill(given.background), grid, truth,
    targets: truth.targets, modelErrorFloor: projectionGap, projectionGap,
    backgroundGap: background > 0 ? gap(problem.evaluate(problem.background()), reference) / background : 0,
    unknowns: 0, elements: frame.length * integrals.lines, cells: problem.unknowns, nodes: problem.nodes,
    kind: `line integrals, ${integrals.kind}`,
  };
}
