import type { PhantomDefinition } from '../../../../shared/domain/phantom-definition';

export interface PhantomListFilters {
  readonly family?: string | undefined;
  readonly q?: string | undefined;
  readonly group?: string | undefined;
  readonly state?: string | undefined;
}
export const phantomKeys = {
  all: ['phantoms'] as const,
  list: (filters: PhantomListFilters) => ['phantoms', 'list', filters] as const,
  detail: (slug: string) => ['phantoms', 'detail', slug] as const,
  version: (slug: string, n: number | 'current') => ['phantoms', 'detail', slug, 'version', n] as const,
  simulation: (slug: string, n: number) => ['phantoms', 'detail', slug, 'version', n, 'simulation'] as const,
  best: (slug: string, n: number, noise: number) => ['phantoms', 'detail', slug, 'version', n, 'best', noise] as const,
  unsaved: (definition: PhantomDefinition | null, checks: boolean) => ['simulations', definition, checks] as const,
  array: (sha256: string) => ['arrays', sha256] as const,
};
