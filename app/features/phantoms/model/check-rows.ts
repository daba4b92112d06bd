import type { CheckResultWire } from '../../../../shared/contracts/common';
import type { FamilyKey } from '../../../../shared/domain/families';
import { formatNumber, formatPercent } from '../../../lib/format';

/** The reading of a check: its figure with its unit. */
export function checkReading(check: Pick<CheckResultWire, 'figure' | 'unit' | 'state'>): string {
  if (check.figure === null) return check.state === 'pass' ? 'yes' : '';
  if (check.unit === '%') return formatPercent(check.figure / 100);
  return check.unit ? `${formatNumber(check.figure, 2)} ${check.unit}` : formatNumber(check.figure, 2);
}

/** The bound in words, for the line under the name. */
export function checkBound(check: Pick<CheckResultWire, 'bound' | 'comparison'>): string {
  if (check.bound === null || check.comparison === null) return '';
  const words = { 'at-most': 'at most', 'at-least': 'at least', equal: 'equal to' } as const;
  return `${words[check.comparison]} ${formatNumber(check.bound, 2)}`;
}

/** 'Largest difference ...; at most 1e-8'. */
export function checkLine(check: Pick<CheckResultWire, 'meaning' | 'bound' | 'comparison'>): string {
  const bound = checkBound(check);
  return bound ? `${check.meaning.replace(/\.$/, '')}; ${bound}` : check.meaning;
}

const shape = { name: 'Data finite and of the right shape', how: 'every value of both frames' };
const gap = { name: 'Discretisations differ', how: 'simulation against inversion' };

const model = [{ name: 'Adjoint', how: 'derivative against its adjoint' }, { name: 'Derivative', how: 'slope of the Taylor remainder' }];

/** Checks of a phantom in the order in which they settle, for the rows shown while they are waited for. */
export const phantomCheckNames: Record<FamilyKey, readonly { name: string; how: string }[]> = {
  'electrical-impedance': [
    shape,
    { name: 'Reciprocity', how: 'swap drive and measurement' },
    { name: 'Mesh convergence', how: 'a finer mesh of the same truth' },
    { name: 'Two simulators agree', how: 'elements against boundary integrals' },
    { name: 'Closed form of the concentric disc', how: 'where the eigenvalues are known' },
    gap,
    { name: 'Shapes clear of the electrodes', how: 'distance of an outline to the edge' },
    ...model,
  ],
  'x-ray': [
    shape,
    { name: 'Closed form of ellipses', how: 'where every shape is one' },
    { name: 'Every view has the mass of the body', how: 'sum of its line integrals' },
    { name: 'Views agree with one another', how: 'moments of all views' },
    gap,
    ...model,
  ],
  'integral-equation': [
    shape,
    { name: 'Closed form of the right-hand side', how: 'where the equation has one' },
    { name: 'Quadrature converged', how: 'panels half as wide' },
    gap,
    { name: 'Singular values add up', how: 'against the size of the kernel' },
    { name: 'Singular values decay as they should', how: 'where they have a closed form' },
    ...model,
  ],
  deblurring: [
    shape,
    { name: 'Point-spread function of unit sum', how: 'a constant stays a constant' },
    { name: 'Closed form of a blurred edge', how: 'where the function has one' },
    { name: 'Samples of the field fine enough', how: 'samples half as far apart' },
    gap,
    ...model,
  ],
};
