import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { FamilyKey } from '../../../../shared/domain/families';
import type { Method } from '../../../../solvers/core/types';
import { methods } from '../../../../solvers/methods/registry';
import { whyUnfit, type RoughFacts } from '../model/fit';
import type { PreviewPhantom } from '../model/preview-data';

export interface Fit {
  /** Why a method does not serve the problem in view; null where it does. */
  readonly reasonOf: (method: Method) => string | null;
  /** The methods that serve it, in registry order; all while no problem is known. */
  readonly offered: readonly Method[];
  readonly refused: readonly { readonly method: Method; readonly reason: string }[];
}

/** Which methods serve the family and, once it is loaded, the phantom in view. Its sizes come with the numerics, fetched when they are first needed. */
export function useFit(family: FamilyKey | null, phantom: PreviewPhantom | null): Fit {
  const registry = useQuery({ queryKey: ['module', 'problems'], queryFn: () => import('../../../../solvers/problems/registry'), enabled: phantom !== null, staleTime: Infinity, structuralSharing: false });
  const problemFacts = registry.data?.problemFacts;
  return useMemo(() => {
    const problem = phantom?.problem;
    const facts: RoughFacts | null = problem ? (problemFacts ? problemFacts(problem) : problem) : family ? { family } : null;
    const reasonOf = (method: Method): string | null => (facts ? whyUnfit(method, facts) : null);
    const judged = methods.map((method) => ({ method, reason: reasonOf(method) }));
    return { reasonOf, offered: judged.filter((j) => j.reason === null).map((j) => j.method), refused: judged.flatMap(({ method, reason }) => (reason === null ? [] : [{ method, reason }])) };
  }, [family, phantom, problemFacts]);
}
