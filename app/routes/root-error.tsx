import { isRouteErrorResponse, useRouteError } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { ButtonLink } from '../components/ui/button';
import { PageHead } from '../components/ui/layout';
import { ErrorPanel } from '../components/ui/notices';
import { paths } from '../lib/paths';
import NotFound from './not-found';

/** A page that threw, or a page file that could not be fetched. */
export function RootError() {
  const error = useRouteError();
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFound />;
  return (
    <Page title="Error">
      <PageHead title="This page stopped working" />
      <ErrorPanel error={error} onRetry={() => window.location.reload()} />
      <p style={{ marginTop: 16 }}><ButtonLink to={paths.home()}>Find a method</ButtonLink></p>
    </Page>
  );
}
