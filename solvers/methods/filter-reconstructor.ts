import type { Reconstructor, RuleSetting } from '../core/types';
import { makeSpectralReconstructor } from './spectral-batch';
import { chooseFilterAlpha, filteredResidual, type SpectralFilter } from './spectral-filter';
import { isZeroFrame, type SpectralSystem } from './spectral-system';

/** A method that is a filter of the spectrum, with alpha by rule, not below `smallestAlpha` times sigma_1 unless fixed. */
export function filterReconstructor(system: SpectralSystem, filter: SpectralFilter, setting: RuleSetting, smallestAlpha: number): Reconstructor {
  const s = system.singularValues;
  const floor = setting.key === 'fixed' ? 0 : smallestAlpha * s[0];
  return makeSpectralReconstructor(system, (frame, noise) => {
    const chosen = isZeroFrame(frame) ? null : chooseFilterAlpha(frame, filter, noise, setting);
    const d = new Float64Array(s.length);
    let residual = frame.outside;
    let parameter: number | null = null;
    if (chosen === null) for (let k = 0; k < s.length; k++) residual += frame.coefficients[k] * frame.coefficients[k];
    else {
      const alpha = Math.max(chosen, floor);
      parameter = alpha / s[0];
      for (let k = 0; k < s.length; k++) d[k] = (filter.filter(s[k], alpha) / s[k]) * frame.coefficients[k];
      residual = filteredResidual(frame, filter, alpha);
    }
    return { d, count: parameter === null ? 0 : s.length, report: { parameter, iterations: 0, forwardSolves: 0, stop: 'direct', residualNorm: Math.sqrt(residual) } };
  });
}
