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

/** Checks of a phantom in the order in which they settle, for the rows shown while they are waited for. */
export const phantomCheckNames: Record<FamilyKey, readonly { name: string; how: string }[]> = {
  'electrical-impedance': [
    shape,
    { name: 'Reciprocity', how: 'swap drive and measurement' },
    { name: 'Convergence of the simulation', how: 'a coarser simulation of the same truth' },
    { name: 'Two simulators agree', how: 'boundary integrals against finite elements' },
    { name: 'Closed form of the concentric disc', how: 'where the eigenvalues are known' },
    gap,
    { name: 'Shapes clear of the electrodes', how: 'distance of an outline to the edge' },
  ],
  'x-ray': [shape, gap],
  'integral-equation': [shape, gap],
  deblurring: [shape, gap],
};
