import { familyNames, type FamilyKey } from '../../../../shared/domain/families';
import type { Method, ProblemFacts } from '../../../../solvers/core/types';

const list = (words: readonly string[]): string => (words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} and ${words[words.length - 1] ?? ''}`);
export const familiesInWords = (families: readonly FamilyKey[]): string => list(families.map((f) => familyNames[f].name.toLowerCase().replace('x-ray', 'X-ray')));

/** What is known of the problem before its model is loaded. */
export type RoughFacts = Pick<ProblemFacts, 'family'> & Partial<ProblemFacts>;

/** Why a method does not serve a problem, for a reader; null where it does, as far as is known. */
export function whyUnfit(method: Method, facts: RoughFacts): string | null {
  const { families, dataKinds } = method.capabilities;
  if (!families.includes(facts.family)) return `${method.name} serves ${familiesInWords(families)}, not ${familiesInWords([facts.family])}.`;
  if (facts.dataKind && !dataKinds.includes(facts.dataKind)) return `${method.name} needs ${dataKinds.join(' or ')} data; this phantom has ${facts.dataKind} data.`;
  const { family, geometry, dataKind, dataSize, unknowns } = facts;
  if (!geometry || !dataKind || dataSize === undefined || unknowns === undefined) return null;
  const reason = method.unfit?.({ family, dataKind, geometry, dataSize, unknowns });
  return reason ? `${method.name} does not serve this phantom: ${reason}` : null;
}
