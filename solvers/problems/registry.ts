/** Problem families: how a phantom is simulated and which model inverts it. One line a family. */
import type { FamilyKey } from '../../shared/domain/families';
import type { Geometry, PhantomDefinition, ProblemDescriptor } from '../../shared/domain/phantom-definition';
import type { EvaluationGrid, ProblemFacts } from '../core/types';
import { deblurringFamily } from './deblurring/family';
import { electricalImpedanceFamily } from './electrical-impedance/family';
import { integralEquationFamily } from './integral-equation/family';
import { layoutSize, type DataLayout, type InversionProblem, type ProblemFamily, type SimulatedData } from './problem-family';
import { xrayFamily } from './x-ray/family';

const families: { readonly [F in FamilyKey]: ProblemFamily<F> } = {
  'electrical-impedance': electricalImpedanceFamily,
  'x-ray': xrayFamily,
  'integral-equation': integralEquationFamily,
  deblurring: deblurringFamily,
};

/** Each family gets its own geometry: the pair is checked by the schema of definitions, which TypeScript cannot follow through the table. */
const familyOf = (key: FamilyKey): ProblemFamily<FamilyKey> => families[key] as unknown as ProblemFamily<FamilyKey>;

/** The descriptor of a phantom definition. */
export function describeProblem(definition: Pick<PhantomDefinition, 'family' | 'geometry' | 'dataKind' | 'truth'>): ProblemDescriptor {
  const { family, geometry, dataKind, truth } = definition;
  return { family, geometry, dataKind, background: truth.background } as ProblemDescriptor;
}

/** The model that inverts. About 0.2 s and 20 MB; keep it for all methods and draws of a phantom. @throws RangeError */
export function createProblem(descriptor: ProblemDescriptor): InversionProblem {
  return familyOf(descriptor.family).create(descriptor);
}

/**
 * Clean data from the independent simulation, the truth on the grid, and the gap of the two models.
 * @param arrayValues rows x cols, row-major, where the truth is an uploaded array
 * @param problem the model that inverts, where the caller has it already
 * @throws RangeError; a TruthError carries the path of the field at fault
 */
export function simulate(definition: PhantomDefinition, arrayValues?: Float64Array, problem?: InversionProblem): SimulatedData {
  return familyOf(definition.family).simulate(definition, arrayValues, problem ?? createProblem(describeProblem(definition)));
}

interface Acquisition {
  readonly family: FamilyKey;
  readonly geometry: Geometry;
}

/** Names of the values of a frame. */
export function dataLayout({ family, geometry }: Acquisition): DataLayout {
  return familyOf(family).layout(geometry);
}

/** The evaluation grid of a geometry. */
export function problemGrid({ family, geometry }: Acquisition): EvaluationGrid {
  return familyOf(family).grid(geometry);
}

/** '16 electrodes, adjacent pairs, difference data'. */
export function problemLine({ family, geometry, dataKind }: Pick<PhantomDefinition, 'family' | 'geometry' | 'dataKind'>): string {
  return familyOf(family).line({ geometry, dataKind });
}

/** What a method may ask about a problem before it is made. */
export function problemFacts({ family, geometry, dataKind }: Pick<PhantomDefinition, 'family' | 'geometry' | 'dataKind'>): ProblemFacts {
  const of = familyOf(family);
  return { family, geometry, dataKind, dataSize: layoutSize(of.layout(geometry)), unknowns: of.unknowns(geometry) };
}
