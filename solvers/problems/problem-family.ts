/** What a family of problems brings: the model that inverts, the simulation, the shape of its data, its checks. */
import type { DefinitionOf, ProblemDescriptor } from '../../shared/domain/phantom-definition';
import type { FamilyKey } from '../../shared/domain/families';
import type { SimulatedPhantom } from '../campaign/trial';
import type { EvaluationGrid, ForwardProblem } from '../core/types';
import type { TruthField } from '../truth/truth-field';

export type DescriptorOf<F extends FamilyKey> = Extract<ProblemDescriptor, { family: F }>;

/** The model of a registered family, with what the floor and the checks need beyond the common contract. */
export interface InversionProblem extends ForwardProblem {
  /** The frame of the unknowns `x`, whatever the data kind. */
  frameOf(x: Float64Array): Float64Array;
  /** A ground truth on the unknowns. */
  project(truth: TruthField): Float64Array;
  /** Nodes of the discretised model; of a family without a mesh, its unknowns. */
  readonly nodes: number;
}

/** How a frame of data is laid out and named. */
export interface DataLayout {
  /** Unit of the data; '' for a pure number. */
  readonly unit: string;
  /** One name a group (pattern, view, row), and one a value within each group. */
  readonly groupNames: readonly string[];
  readonly valueNames: readonly (readonly string[])[];
}

/** Clean data of a phantom with what the pages show of the two models. */
export interface SimulatedData extends SimulatedPhantom {
  /** Data with the target and of the background, group after group. */
  readonly frame: Float64Array;
  readonly reference: Float64Array;
  readonly grid: EvaluationGrid;
  readonly truth: TruthField;
  /**
   * The model-error floor that noise levels are compared to, over the norm that they are relative to. Electrical impedance: the gap of the
   * two models on the background, ||F_inv(background) - F_sim(background)||. Other families, whose background tells nothing: the gap on the
   * ground truth projected on the unknowns.
   */
  readonly modelErrorFloor: number;
  /** ||F_inv(background) - F_sim(background)|| / ||F_sim(background)||; 0 where the background has no data. */
  readonly backgroundGap: number;
  /**
   * Gap of the data (in the phantom's data kind) of the truth projected on the inversion's unknowns, over the norm that noise
   * levels are relative to. It is ruled by how the cells follow the outlines of shapes: a reconstruction can still fit data below it.
   */
  readonly projectionGap: number;
  /** Unknowns and elements (or rays, nodes, samples) of the simulation. */
  readonly unknowns: number;
  readonly elements: number;
  /** Unknowns and nodes of the inversion. */
  readonly cells: number;
  readonly nodes: number;
  /** How the data were simulated, for a reader. */
  readonly kind: string;
}

export interface ProblemFamily<F extends FamilyKey> {
  /** The model that inverts. Keep it for all methods and draws of a phantom. @throws RangeError */
  readonly create: (descriptor: DescriptorOf<F>) => InversionProblem;
  /**
   * Clean data from a closed form or an independent, finer discretisation.
   * @throws RangeError; a TruthError carries the path of the field at fault
   */
  readonly simulate: (definition: DefinitionOf<F>, arrayValues: Float64Array | undefined, problem: InversionProblem) => SimulatedData;
  readonly layout: (geometry: DefinitionOf<F>['geometry']) => DataLayout;
  /** The grid on which errors are measured, without making the problem. */
  readonly grid: (geometry: DefinitionOf<F>['geometry']) => EvaluationGrid;
  /** Number of unknowns of the inversion; about, where only its mesh tells. */
  readonly unknowns: (geometry: DefinitionOf<F>['geometry']) => number;
  /** '16 electrodes, adjacent pairs, difference data'. */
  readonly line: (definition: Pick<DefinitionOf<F>, 'geometry' | 'dataKind'>) => string;
}

/** Values in one frame. */
export function layoutSize(layout: DataLayout): number {
  let count = 0;
  for (const names of layout.valueNames) count += names.length;
  return count;
}
