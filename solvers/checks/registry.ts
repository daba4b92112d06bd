/** Checks by what they look at. One line a check. */
import type { ForwardProblem } from '../core/types';
import { adjointCheck } from './adjoint';
import { batchEqualsSingleCheck } from './batch-equals-single';
import { beatsTrivialCheck } from './beats-trivial';
import { blurredEdgeCheck } from './blurred-edge';
import type { Check } from './check';
import { closedFormCheck } from './closed-form';
import { constantKeptCheck } from './constant-kept';
import { dataShapeCheck } from './data-shape';
import { discretisationsDifferCheck } from './discretisations-differ';
import { equationClosedFormCheck } from './equation-closed-form';
import { homogeneityCheck, type HomogeneityInput } from './homogeneity';
import { kernelSizeCheck } from './kernel-size';
import { meshConvergenceCheck } from './mesh-convergence';
import { equationNodesDifferCheck, pictureNodesDifferCheck } from './nodes-differ';
import { noiseCalibrationCheck } from './noise-calibration';
import { noiseNormalityCheck } from './noise-normality';
import type { FamilyKey } from '../../shared/domain/families';
import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import type { PhantomCheckContext } from './phantom-check';
import { quadratureConvergenceCheck } from './quadrature-convergence';
import { modelsDifferCheck, projectorConvergenceCheck, rayClosedFormCheck, rayConvergenceCheck } from './ray-simulation';
import { recomputationCheck } from './recomputation';
import { reciprocityCheck } from './reciprocity';
import type { RunCheckContext } from './run-check';
import { samplingConvergenceCheck } from './sampling-convergence';
import { shapesInBodyCheck } from './shapes-in-body';
import { simulatorsAgreeCheck } from './simulators-agree';
import { singularValueDecayCheck } from './singular-value-decay';
import { taylorCheck } from './taylor';
import { totalMassCheck, viewMomentsCheck } from './view-moments';

/** Of a simulated phantom, by its family. */
export const phantomChecks: { readonly [F in FamilyKey]: readonly Check<PhantomCheckContext<DefinitionOf<F>>>[] } = {
  'electrical-impedance': [dataShapeCheck, reciprocityCheck, meshConvergenceCheck, simulatorsAgreeCheck, closedFormCheck, discretisationsDifferCheck, shapesInBodyCheck],
  'x-ray': [dataShapeCheck, rayClosedFormCheck, totalMassCheck, viewMomentsCheck, rayConvergenceCheck, projectorConvergenceCheck, modelsDifferCheck],
  'integral-equation': [dataShapeCheck, equationClosedFormCheck, quadratureConvergenceCheck, equationNodesDifferCheck, kernelSizeCheck, singularValueDecayCheck],
  deblurring: [dataShapeCheck, constantKeptCheck, blurredEdgeCheck, samplingConvergenceCheck, pictureNodesDifferCheck],
};

/** Of the model that inverts. */
export const problemChecks: readonly Check<ForwardProblem>[] = [adjointCheck, taylorCheck];

/** Of a prepared method. */
export const methodChecks: readonly Check<HomogeneityInput>[] = [homogeneityCheck];

/** Of a finished run. */
export const runChecks: readonly Check<RunCheckContext>[] = [noiseCalibrationCheck, noiseNormalityCheck, batchEqualsSingleCheck, recomputationCheck, beatsTrivialCheck];
