import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { Outlet, ScrollRestoration, useLocation, useNavigation } from 'react-router-dom';
import { Footer } from '../components/layout/footer';
import { Masthead } from '../components/layout/masthead';
import { NoiseProvider } from '../components/noise-rule/use-noise';
import { useSession } from '../features/session/api/session';
import { queueQueryOptions, reviewCountQueryOptions } from '../features/site/api/search';
import { SiteSearch } from '../features/site/components/site-search';
import { plural } from '../lib/format';

/** The frame of every page: masthead, the page, footer. */
export function Root() {
  const session = useSession();
  const reviewer = session.can('review.read-queue');
  const count = useQuery({ ...reviewCountQueryOptions(), enabled: reviewer });
  const queue = useQuery(queueQueryOptions());
  const busy = queue.data ? queue.data.queued + queue.data.running : 0;
  const navigation = useNavigation();
  return (
    <NoiseProvider>
      <Masthead
        handle={session.account?.handle ?? null}
        reviewCount={reviewer ? (count.data?.waiting ?? null) : null}
        maySubmitSolver={session.canSomewhere('solver.create')}
        mayCreatePhantom={session.canSomewhere('phantom.create')}
        mayAdminister={session.can('site.administer')}
        search={(id) => <SiteSearch id={id} />}
      />
      <div aria-busy={navigation.state !== 'idle'}>
        <Outlet />
      </div>
      <Footer note={busy ? `${plural(busy, 'run')} in the queue, ${queue.data?.running ?? 0} at work` : undefined} />
      <FocusOnArrival />
      <ScrollRestoration getKey={(location) => location.pathname} />
    </NoiseProvider>
  );
}

/** After a change of page the focus starts at its content, so that a screen reader reads the new heading. */
function FocusOnArrival() {
  const { pathname } = useLocation();
  useEffect(() => {
    if (document.activeElement && document.activeElement !== document.body && document.activeElement.closest('main')) return;
    document.getElementById('main')?.focus({ preventScroll: true });
  }, [pathname]);
  return null;
}
