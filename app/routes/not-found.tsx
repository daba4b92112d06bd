import { useLocation } from 'react-router-dom';
import { Page } from '../components/layout/page';
import { ButtonLink } from '../components/ui/button';
import { PageHead } from '../components/ui/layout';
import { Empty } from '../components/ui/notices';
import { paths } from '../lib/paths';

/** `what` names the thing a page looked for: 'bench'. */
export default function NotFound({ what = 'page' }: { what?: string }) {
  const { pathname } = useLocation();
  return (
    <Page title="Not found">
      <PageHead title={`No ${what} is registered here`} />
      <Empty title={<span className="mono">{pathname}</span>}>
        The address may be mistyped, or it belongs to a draft that only its group can read. Search by name, identifier or hash in the masthead.
      </Empty>
      <div className="flex gap-x2 flex-wrap" style={{ marginTop: 16 }}>
        <ButtonLink to={paths.home()}>Find a method</ButtonLink>
        <ButtonLink to={paths.benches()}>Benches</ButtonLink>
        <ButtonLink to={paths.phantoms()}>Phantoms</ButtonLink>
      </div>
    </Page>
  );
}
