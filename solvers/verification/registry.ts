import { findByKey } from '../core/registry';
import type { VerificationCheck } from './check';
import { boundaryIntegralChecks } from './boundary-integrals';
import { closedFormChecks } from './closed-forms';
import { concentricDiscChecks } from './concentric-disc';
import { deblurringChecks } from './deblurring';
import { derivativeChecks } from './derivatives';
import { directMethodChecks } from './direct-methods';
import { electrodeModelChecks } from './electrode-model';
import { integralEquationChecks } from './integral-equations';
import { metricChecks } from './metrics';
import { randomnessChecks } from './randomness';
import { regularisationChecks } from './regularisation';
import { statisticsChecks } from './statistics';
import { xrayChecks } from './x-ray';

/** Every published value that an instance computes again, in the order of the page. */
export const verificationChecks: readonly VerificationCheck[] = [
  ...concentricDiscChecks, ...electrodeModelChecks, ...boundaryIntegralChecks, ...integralEquationChecks, ...deblurringChecks, ...derivativeChecks, ...xrayChecks, ...regularisationChecks, ...closedFormChecks, ...directMethodChecks, ...metricChecks, ...statisticsChecks, ...randomnessChecks,
];

/** @throws RangeError for an unknown key */
export const getVerificationCheck = (key: string): VerificationCheck => findByKey(verificationChecks, key, 'verification check');
