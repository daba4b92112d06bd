import type { NoiseInfo, ParameterField, RuleKey, RuleSetting, Source } from '../core/types';
import type { AlphaChoice, IndexChoice, SpectralData } from './spectral-data';

/** A parameter-choice rule. One file in `solvers/parameter-choice`, one line in its registry. */
export interface ParameterRule {
  readonly key: RuleKey;
  readonly name: string;
  readonly summary: string;
  /** LaTeX. */
  readonly formula: string;
  readonly sources: readonly Source[];
  /** True for a rule that is told the noise level; pages say so. */
  readonly usesNoiseLevel: boolean;
  /** Settings of the rule itself, for forms. The value of 'fixed' is described by the method. */
  readonly fields: readonly ParameterField[];
  readonly defaultSetting: RuleSetting;
  /** Numbered conventions for the reference page. */
  readonly conventions: readonly string[];
  /**
   * alpha of Tikhonov's functional ||A z - y||^2 + alpha^2 ||z||^2. `setting.value` of 'fixed' is alpha over sigma_1.
   * @throws RangeError when the setting belongs to another rule
   */
  chooseAlpha(data: SpectralData, noise: NoiseInfo, setting: RuleSetting): AlphaChoice;
  /** Truncation index k <= limit. */
  chooseIndex(data: SpectralData, noise: NoiseInfo, setting: RuleSetting, limit: number): IndexChoice;
}

export function requireSetting<K extends RuleKey>(setting: RuleSetting, key: K): Extract<RuleSetting, { key: K }> {
  if (setting.key !== key) throw new RangeError(`The setting of rule '${setting.key}' was given to rule '${key}'.`);
  return setting as Extract<RuleSetting, { key: K }>;
}
