import { Link } from 'react-router-dom';
import { Tag } from '../../../components/ui/layout';
import { Seal } from '../../../components/ui/seal';
import { StateMark } from '../../../components/ui/state-mark';
import { formatCount, formatHash, formatShortDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';

export function PhantomVersions({ detail }: { detail: PhantomDetail }) {
  return (
    <>
      <div className="sh"><h2>Versions</h2><p>a version never changes once it is submitted</p></div>
      <div className="sheet">
        <table className="vt">
          <caption className="vh">Versions of {detail.name}</caption>
          <thead><tr><th scope="col">Version</th><th scope="col">Seal</th><th scope="col">Content hash</th><th scope="col">What changed</th><th scope="col" className="num">Runs</th><th scope="col" className="num">Date</th></tr></thead>
          <tbody>
            {[...detail.versions].sort((a, b) => b.n - a.n).map((v) => (
              <tr key={v.n}>
                <td style={{ fontWeight: v.n === detail.version.n ? 600 : 400 }}>
                  {v.n === detail.version.n ? `v${v.n}` : <Link to={paths.phantomVersion(detail.slug, v.n)}>v{v.n}</Link>}{' '}
                  {v.n === detail.current.n ? <Tag>current</Tag> : null} {v.state !== 'published' ? <StateMark state={v.state} /> : null}
                </td>
                <td><Seal hash={v.contentHash} size={30} lines={3} /></td>
                <td className="mono">{formatHash(v.contentHash)}</td>
                <td>{v.whatChanged || (v.n === 1 ? 'First version' : '')}</td>
                <td className="num">{formatCount(v.runs)}</td>
                <td className="num">{formatShortDate(v.publishedAt ?? v.createdAt)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </>
  );
}
