export const runKeys = {
  all: ['runs'] as const,
  list: (filters: Record<string, string | undefined>) => [...runKeys.all, 'list', filters] as const,
  detail: (id: string) => [...runKeys.all, 'detail', id] as const,
  trials: (id: string, level?: number) => [...runKeys.detail(id), 'trials', level ?? 'all'] as const,
  image: (id: string, level: number, draw: number | 'median' | 'worst') => [...runKeys.detail(id), 'image', level, draw] as const,
  comments: (id: string) => [...runKeys.detail(id), 'comments'] as const,
  recomputation: (id: string) => [...runKeys.detail(id), 'recomputation'] as const,
  replay: (id: string) => [...runKeys.detail(id), 'replay'] as const,
};
