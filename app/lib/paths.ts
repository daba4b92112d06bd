/** Every address of the client. Parts are encoded here and nowhere else. */
const e = encodeURIComponent;

export const paths = {
  home: () => '/',
  benches: () => '/benches',
  benchNew: () => '/benches/new',
  bench: (slug: string) => `/benches/${e(slug)}`,
  compare: (runIds: readonly string[] = []) => (runIds.length ? `/compare?runs=${runIds.map(e).join(',')}` : '/compare'),
  phantoms: () => '/phantoms',
  phantomNew: () => '/phantoms/new',
  phantom: (slug: string) => `/phantoms/${e(slug)}`,
  phantomVersion: (slug: string, version: number) => `/phantoms/${e(slug)}/v/${version}`,
  solvers: () => '/solvers',
  solverNew: () => '/solvers/new',
  solver: (slug: string) => `/solvers/${e(slug)}`,
  run: (id: string) => `/runs/${e(id)}`,
  review: () => '/review',
  groups: () => '/groups',
  group: (slug: string) => `/groups/${e(slug)}`,
  account: () => '/account',
  admin: () => '/admin',
  signIn: (returnTo?: string) => (returnTo ? `/sign-in?return=${e(returnTo)}` : '/sign-in'),
  reference: () => '/reference',
  referenceEntry: (kind: string, key: string) => `/reference/${e(kind)}/${e(key)}`,
  verification: () => '/verification',
  apiReference: () => '/api',
} as const;

/** `path` with the search parameters that travel between pages (the rule's noise) kept. */
export function keepNoise(path: string, search: URLSearchParams): string {
  const noise = search.get('noise');
  if (!noise) return path;
  return `${path}${path.includes('?') ? '&' : '?'}noise=${e(noise)}`;
}
