export interface SolverListFilters {
  readonly q?: string | undefined;
  readonly method?: string | undefined;
  readonly group?: string | undefined;
}
export const solverKeys = {
  all: ['solvers'] as const,
  list: (filters: SolverListFilters) => ['solvers', 'list', filters] as const,
  detail: (slug: string) => ['solvers', 'detail', slug] as const,
  stability: (slug: string, n: number, metric: string) => ['solvers', 'detail', slug, 'stability', n, metric] as const,
};
