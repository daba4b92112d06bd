import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';
import type { SimulatedPhantom } from '../../campaign/trial';
import type { EvaluationGrid } from '../../core/types';
import { norm2 } from '../../core/vector';
import { requireInBody } from '../../truth/check-in-body';
import { createTruthField, type TruthField } from '../../truth/truth-field';
import { truthOnGrid } from '../../truth/truth-on-grid';
import type { EitInversion } from './inversion-problem';
import { simulateElectricalImpedance, type SimulationOptions } from './simulation';

/** Clean data of a phantom with what the pages show of the two models. Voltages in V, conductivity in S/m. */
export interface SimulatedImpedance extends SimulatedPhantom {
  /** Voltages with the target and of the background, pattern-major. */
  readonly frame: Float64Array;
  readonly reference: Float64Array;
  readonly grid: EvaluationGrid;
  readonly truth: TruthField;
  /**
   * The model-error floor that noise levels are compared to: the gap of the two models on the background,
   * ||F_inv(background) - F_sim(background)||, over the norm that noise levels are relative to. For difference data the gap
   * of the background cancels in large part, so the figure is on the safe side there.
   */
  readonly modelErrorFloor: number;
  /** The same gap over ||F_sim(background)||. */
  readonly backgroundGap: number;
  /**
   * Gap of the data (in the phantom's data kind) of the truth projected on the inversion's cells, over the norm that noise
   * levels are relative to. It is ruled by how the cells follow the outlines of shapes, not by the potential: a
   * reconstruction can still fit data below it.
   */
  readonly projectionGap: number;
  /** Nodes and electrodes, and elements, of the simulation. */
  readonly unknowns: number;
  readonly elements: number;
  /** Cells and nodes of the inversion. */
  readonly cells: number;
  readonly nodes: number;
  /** How the data were simulated, for a reader. */
  readonly kind: string;
}

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
 * Simulates a phantom and measures the gap to the model that will invert.
 * @param problem the inversion's model of the same geometry and background
 * @throws RangeError (TruthError where a field of the truth is at fault) for what cannot be simulated
 */
export function simulateImpedancePhantom(definition: PhantomDefinition, arrayValues: Float64Array | undefined, problem: EitInversion, options?: SimulationOptions): SimulatedImpedance {
  const truth = createTruthField(definition.truth, arrayValues);
  if (definition.truth.kind === 'shapes') {
    const { shapes } = definition.truth;
    requireInBody(definition.truth, definition.geometry.body.radius, (i) => createTruthField({ kind: 'shapes', background: truth.background, shapes: [shapes[i]] }));
  }
  const { grid } = problem;
  const truthImage = truthOnGrid(truth, grid);
  const simulation = simulateElectricalImpedance(truth, definition.geometry, options);
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
    kind: 'complete electrode model, graded isoparametric quadratic elements',
  };
}
