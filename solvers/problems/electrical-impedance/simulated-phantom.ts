import type { DefinitionOf } from '../../../shared/domain/phantom-definition';
import { bodyContains } from '../../core/grid';
import { norm2 } from '../../core/vector';
import { requireInBody, requireInOutline } from '../../truth/check-in-body';
import { createTruthField } from '../../truth/truth-field';
import { truthOnGrid } from '../../truth/truth-on-grid';
import type { SimulatedData } from '../problem-family';
import { isDisc } from './body-curve';
import { simulateImpedanceData } from './data-simulation';
import type { EitInversion } from './inversion-problem';
import type { SimulationOptions } from './simulation';

/** ||F_inv(background) - reference|| / ||reference||, the raw gap of the two models on the background. */
export function backgroundGap(problem: EitInversion, reference: Float64Array): number {
  return gap(problem.frameOf(problem.background()), reference) / norm2(reference);
}

function gap(a: Float64Array, b: Float64Array): number {
  const difference = new Float64Array(a.length);
  for (let i = 0; i < a.length; i++) difference[i] = a[i] - b[i];
  return norm2(difference);
}

/**
 * Simulates a phantom, by boundary integrals where its outlines are smooth and by finite elements elsewhere, and measures the gap to the model that will invert.
 * @param problem the inversion's model of the same geometry and background
 * @throws RangeError (TruthError where a field of the truth is at fault) for what cannot be simulated
 */
export function simulateImpedancePhantom(definition: DefinitionOf<'electrical-impedance'>, arrayValues: Float64Array | undefined, problem: EitInversion, options?: SimulationOptions): SimulatedData {
  const truth = createTruthField(definition.truth, arrayValues);
  if (definition.truth.kind === 'shapes') {
    const { shapes } = definition.truth;
    const { body } = definition.geometry;
    const fieldOf = (i: number) => createTruthField({ kind: 'shapes', background: truth.background, shapes: [shapes[i]] });
    if (isDisc(body)) requireInBody(definition.truth, body.radius, fieldOf);
    else requireInOutline(definition.truth, bodyContains(body), body.radius, fieldOf);
  }
  const { grid } = problem;
  const truthImage = truthOnGrid(truth, grid);
  const simulation = simulateImpedanceData(truth, definition.geometry, options);
  const { data: frame, reference } = simulation;
  const difference = new Float64Array(frame.length);
  for (let i = 0; i < frame.length; i++) difference[i] = frame[i] - reference[i];
  const clean = definition.dataKind === 'difference' ? difference : frame;
  const noiseScale = norm2(definition.noiseReference === 'difference' ? difference : frame);
  // Two solves of the same model differ by rounding, about 1e-13 of the voltages.
  if (!(noiseScale > 1e-11 * norm2(reference)))
    throw new RangeError('The data with the ground truth equal those of the background, so noise relative to their difference is not defined: add a shape, or state the noise relative to the voltages.');
  const rawGap = backgroundGap(problem, reference);
  return {
    clean,
    frame,
    reference,
    noiseScale,
    truthImage,
    backgroundImage: new Float64Array(truthImage.length).fill(truth.background),
    grid,
    truth,
    targets: truth.targets,
    modelErrorFloor: (rawGap * norm2(reference)) / noiseScale,
    backgroundGap: rawGap,
    projectionGap: gap(problem.evaluate(problem.project(truth)), clean) / noiseScale,
    unknowns: simulation.unknowns,
    elements: simulation.elements,
    cells: problem.unknowns,
    nodes: problem.nodes,
    kind: simulation.kind,
  };
}
