import type { ProblemFacts } from '../core/types';

/** Data or unknowns, the smaller number of them, beyond which a singular value decomposition takes minutes. */
export const largestSpectrum = 1500;
/** Entries of the explicit derivative: 64 MB. */
export const largestMatrix = 8_000_000;

/** `Method.unfit` of a method that needs the explicit derivative and its singular vectors. */
export function explicitLimit({ dataSize, unknowns }: ProblemFacts): string | null {
  if (Math.min(dataSize, unknowns) <= largestSpectrum && dataSize * unknowns <= largestMatrix) return null;
  return `it needs the singular vectors of a ${dataSize} x ${unknowns} matrix; the limit is ${largestSpectrum} on the shorter side and ${largestMatrix / 1e6} million entries. CGLS, LSQR, SIRT and total variation work without them.`;
}
