/** Problem families: how a phantom is simulated and which model inverts it. One line a family. */
import type { FamilyKey } from '../../shared/domain/families';
import type { DataKind, EitGeometry, PhantomDefinition } from '../../shared/domain/phantom-definition';
import type { ForwardProblem } from '../core/types';
import { createEitInversion, type EitInversion } from './electrical-impedance/inversion-problem';
import { simulateImpedancePhantom, type SimulatedImpedance } from './electrical-impedance/simulated-phantom';

/** What an inversion knows of a phantom: everything but the ground truth. */
export interface ProblemDescriptor {
  readonly family: FamilyKey;
  readonly geometry: EitGeometry;
  readonly dataKind: DataKind;
  /** Background conductivity, S/m. */
  readonly background: number;
}

interface ProblemFamily<P extends ForwardProblem> {
  readonly create: (descriptor: ProblemDescriptor) => P;
  readonly simulate: (definition: PhantomDefinition, arrayValues: Float64Array | undefined, problem: P) => SimulatedImpedance;
}

const families: { readonly [K in FamilyKey]: ProblemFamily<EitInversion> } = {
  'electrical-impedance': { create: ({ geometry, background, dataKind }) => createEitInversion(geometry, background, dataKind), simulate: simulateImpedancePhantom },
};

/** The descriptor of a phantom definition. */
export function describeProblem(definition: PhantomDefinition): ProblemDescriptor {
  return { family: definition.family, geometry: definition.geometry, dataKind: definition.dataKind, background: definition.truth.background };
}

/** The model that inverts. About 0.2 s and 20 MB; keep it for all methods and draws of a phantom. @throws RangeError */
export function createProblem(descriptor: ProblemDescriptor): EitInversion {
  return families[descriptor.family].create(descriptor);
}

/**
 * Clean data from the independent simulation, the truth on the grid, and the gap of the two models.
 * @param arrayValues rows x cols, row-major, where the truth is an uploaded array
 * @param problem the model that inverts, where the caller has it already
 * @throws RangeError; a TruthError carries the path of the field at fault
 */
export function simulate(definition: PhantomDefinition, arrayValues?: Float64Array, problem?: EitInversion): SimulatedImpedance {
  const family = families[definition.family];
  return family.simulate(definition, arrayValues, problem ?? family.create(describeProblem(definition)));
}
