export const benchKeys = {
  all: ['benches'] as const,
  list: (filters: Record<string, string | undefined>) => [...benchKeys.all, 'list', filters] as const,
  detail: (slug: string) => [...benchKeys.all, 'detail', slug] as const,
  ranking: (slug: string, noise: number, metric: string | undefined, over: string | undefined) => [...benchKeys.detail(slug), 'ranking', noise, metric ?? 'standing', over ?? 'level'] as const,
  comparison: (slug: string, filters: { noise: number; metric: string; over: string; phantom?: string | undefined }) => [...benchKeys.detail(slug), 'comparison', filters] as const,
  series: (slug: string, metric: string | undefined, phantom: string | undefined) => [...benchKeys.detail(slug), 'series', metric ?? 'standing', phantom ?? 'all'] as const,
  citation: (slug: string) => [...benchKeys.detail(slug), 'citation'] as const,
};
