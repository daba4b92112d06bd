import { findByKey } from '../core/registry';
import type { RuleKey } from '../core/types';
import { cumulativePeriodogramRule } from './cumulative-periodogram';
import { discrepancyRule } from './discrepancy';
import { fixedRule } from './fixed';
import { gcvRule } from './gcv';
import { lCurveRule } from './l-curve';
import { quasiOptimalityRule } from './quasi-optimality';
import type { ParameterRule } from './rule';

export const parameterRules: readonly ParameterRule[] = [fixedRule, discrepancyRule, gcvRule, lCurveRule, quasiOptimalityRule, cumulativePeriodogramRule];

/** @throws RangeError for an unknown key. */
export const getParameterRule = (key: RuleKey): ParameterRule => findByKey(parameterRules, key, 'parameter-choice rule');
