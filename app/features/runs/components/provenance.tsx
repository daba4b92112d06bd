import type { RunDetail } from '../../../../shared/contracts/runs';
import { Seal } from '../../../components/ui/seal';
import { formatHash } from '../../../lib/format';

/** Everything needed to repeat the run. */
export function Provenance({ run }: { run: RunDetail }) {
  return (
    <div className="sheet" tabIndex={0} role="region" aria-label="Provenance, scrolls sideways">
      <table className="prov" id="provenance">
        <thead className="vh"><tr><th scope="col">What</th><th scope="col">Which</th><th scope="col">Hash</th><th scope="col">Seal</th></tr></thead>
        <tbody>
          {run.provenance.map((row) => (
            <tr key={row.what}>
              <th scope="row">{row.what}</th>
              <td>{row.detail}</td>
              <td className="num mono" title={row.hash ?? undefined}>{row.hash ? formatHash(row.hash) : ''}</td>
              <td>{row.hash ? <Seal hash={row.hash} size={24} lines={2} /> : null}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
