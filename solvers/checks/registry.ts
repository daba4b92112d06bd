/** Checks by what they look at. One line a check. */
import type { ForwardProblem } from '../core/types';
import { adjointCheck } from './adjoint';
import type { Check } from './check';
import { homogeneityCheck, type HomogeneityInput } from './homogeneity';
import { taylorCheck } from './taylor';

/** Of the model that inverts. */
export const problemChecks: readonly Check<ForwardProblem>[] = [adjointCheck, taylorCheck];

/** Of a prepared method. */
export const methodChecks: readonly Check<HomogeneityInput>[] = [homogeneityCheck];
