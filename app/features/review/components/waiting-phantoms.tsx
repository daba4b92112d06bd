import { Link } from 'react-router-dom';
import { ButtonLink } from '../../../components/ui/button';
import { Empty } from '../../../components/ui/notices';
import { StateMark } from '../../../components/ui/state-mark';
import { paths } from '../../../lib/paths';
import type { WaitingPhantom } from '../api/review';
import { Waited } from './waiting-runs';

/** Phantom versions that wait for a word before they are published. */
export function WaitingPhantoms({ phantoms }: { phantoms: readonly WaitingPhantom[] }) {
  if (!phantoms.length) return <Empty title="No phantom waits">A submitted phantom stands here until a reviewer publishes it or asks for changes.</Empty>;
  return (
    <div className="sheet">
      {phantoms.map((phantom) => (
        <div className="wp" key={`${phantom.id}-${phantom.version}`}>
          <span className="wait"><Waited of={phantom} /></span>
          <div>
            <b><Link className="strong" to={paths.phantomVersion(phantom.slug, phantom.version)}>{phantom.name}</Link></b>
            <p className="sm"><span className="mono">{phantom.id} v{phantom.version}</span>, {phantom.group.name}, submitted by {phantom.submittedBy.handle}</p>
          </div>
          <span className="dots-row">{phantom.checks.map((check) => <StateMark key={check.key} state={check.state} quiet word={`${check.name}: ${check.state}`} />)}</span>
          <ButtonLink to={paths.phantomVersion(phantom.slug, phantom.version)}>{phantom.mayReview ? 'Review this phantom' : 'Open (own group)'}</ButtonLink>
        </div>
      ))}
    </div>
  );
}
