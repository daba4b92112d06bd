import { describe, expect, it } from 'vitest';
import { familiesInWords, whyUnfit } from '../../../app/features/solvers/model/fit';
import { familyKeys } from '../../../shared/domain/families';
import { getMethod, methods } from '../../../solvers/methods/registry';
import { problemFacts } from '../../../solvers/problems/registry';
import type { PhantomDefinition } from '../../../shared/domain/phantom-definition';

const equation: Pick<PhantomDefinition, 'family' | 'geometry' | 'dataKind'> = { family: 'integral-equation', geometry: { equation: 'phillips', cells: 32, points: 32 }, dataKind: 'absolute' };

describe('why a method does not serve a problem', () => {
  it('names the families that it serves', () => {
    expect(whyUnfit(getMethod('gauss-newton'), { family: 'deblurring' })).toBe(`${getMethod('gauss-newton').name} serves electrical impedance, not deblurring.`);
    expect(familiesInWords(['x-ray', 'integral-equation', 'deblurring'])).toBe('X-ray tomography, integral equation and deblurring');
  });
  it('gives the method\'s own reason once the sizes are known', () => {
    const picky = { ...getMethod('tikhonov'), unfit: () => 'Too large.' };
    expect(whyUnfit(picky, { family: 'integral-equation' })).toBeNull();
    expect(whyUnfit(picky, problemFacts(equation))).toBe('Tikhonov regularisation does not serve this phantom: Too large.');
  });
  it('leaves every family some methods, and every method some family', () => {
    for (const family of familyKeys) expect(methods.filter((m) => whyUnfit(m, { family }) === null).length, family).toBeGreaterThan(3);
    for (const method of methods) expect(familyKeys.some((family) => whyUnfit(method, { family }) === null), method.key).toBe(true);
  });
});
