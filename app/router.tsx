import { createBrowserRouter, type RouteObject } from 'react-router-dom';
import NotFound from './routes/not-found';
import { RootError } from './routes/root-error';
import { Root } from './routes/root';

type Load = () => Promise<{ default: React.ComponentType }>;

/** A route whose page is fetched when it is first opened. */
function page(path: string, load: Load): RouteObject {
  return { path, lazy: async () => ({ Component: (await load()).default }) };
}

export const routes: RouteObject[] = [
  {
    path: '/',
    Component: Root,
    ErrorBoundary: RootError,
    HydrateFallback: () => null,
    children: [
      { index: true, lazy: async () => ({ Component: (await import('./routes/home')).default }) },
      page('benches', () => import('./routes/benches')),
      page('benches/new', () => import('./routes/bench-new')),
      page('benches/:slug', () => import('./routes/bench')),
      page('compare', () => import('./routes/compare')),
      page('phantoms', () => import('./routes/phantoms')),
      page('phantoms/new', () => import('./routes/phantom-new')),
      page('phantoms/:slug', () => import('./routes/phantom')),
      page('phantoms/:slug/v/:n', () => import('./routes/phantom')),
      page('solvers', () => import('./routes/solvers')),
      page('solvers/new', () => import('./routes/solver-new')),
      page('solvers/:slug', () => import('./routes/solver')),
      page('runs/:id', () => import('./routes/run')),
      page('review', () => import('./routes/review')),
      page('groups', () => import('./routes/groups')),
      page('groups/:slug', () => import('./routes/group')),
      page('account', () => import('./routes/account')),
      page('admin', () => import('./routes/admin')),
      page('sign-in', () => import('./routes/sign-in')),
      page('reference', () => import('./routes/reference')),
      page('reference/:kind/:key', () => import('./routes/reference-entry')),
      page('verification', () => import('./routes/verification')),
      page('api', () => import('./routes/api-reference')),
      { path: '*', Component: NotFound },
    ].map((route) => ({ ErrorBoundary: RootError, ...route })),
  },
];

export const router = createBrowserRouter(routes);
