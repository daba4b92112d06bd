import { requireSetting, type ParameterRule } from './rule';

/** One value for every noise level. */
export const fixedRule: ParameterRule = {
  key: 'fixed',
  name: 'Fixed',
  summary: 'The same value at every noise level and in every draw. For Tikhonov the value is alpha as a share of the largest singular value.',
  formula: '\\alpha = \\alpha_0\\,\\sigma_1',
  sources: [],
  usesNoiseLevel: false,
  fields: [],
  defaultSetting: { key: 'fixed', value: 0.01 },
  conventions: ['A share of the largest singular value, so that one configuration can run on phantoms with other currents and units.'],
  chooseAlpha(data, _noise, setting) {
    return { alpha: requireSetting(setting, 'fixed').value * data.singularValues[0], attained: true };
  },
  chooseIndex(_data, _noise, setting, limit) {
    const value = Math.round(requireSetting(setting, 'fixed').value);
    return { index: Math.min(value, limit), attained: value <= limit };
  },
};
