import { useState } from 'react';
import type { AuditEntryWire } from '../../../../shared/contracts/audit';
import { Button } from '../../../components/ui/button';
import { Field } from '../../../components/ui/field';
import { Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { formatDateTime } from '../../../lib/format';
import { useAudit } from '../api/admin';

const show = (value: unknown): string => (value === null || value === undefined ? '' : typeof value === 'string' ? value : JSON.stringify(value, null, 1));

function Change({ entry }: { entry: AuditEntryWire }) {
  const before = show(entry.before);
  const after = show(entry.after);
  if (!before && !after) return null;
  return <pre>{before}{before && after ? ' → ' : ''}{after}</pre>;
}

/** Every state change, newest first. Entries are never changed; the database refuses it. */
export function AuditPanel() {
  const [actor, setActor] = useState('');
  const [action, setAction] = useState('');
  const audit = useAudit({ actor, action });
  const rows = audit.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <>
      <div className="filters">
        <Field label="Handle" value={actor} onChange={(event) => setActor(event.target.value)} />
        <Field label="Action or its noun" value={action} onChange={(event) => setAction(event.target.value)} placeholder="run, phantom, group" />
      </div>
      {audit.isPending ? <Loading label="Reading the audit trail" /> : null}
      {audit.isError ? <ErrorPanel error={audit.error} what="The audit trail" onRetry={() => void audit.refetch()} /> : null}
      {audit.data && rows.length === 0 ? <Empty title="No entry fits">Clear a filter.</Empty> : null}
      {rows.length ? (
        <div className="sheet" style={{ overflowX: 'auto' }} tabIndex={0} role="region" aria-label="Audit trail, scrolls sideways">
          <table className="trail">
            <caption className="vh">Audit trail</caption>
            <thead><tr><th scope="col">When</th><th scope="col">Who</th><th scope="col">What</th><th scope="col">On</th><th scope="col">From, to</th><th scope="col">Detail</th></tr></thead>
            <tbody>
              {rows.map((entry) => (
                <tr key={entry.id}>
                  <td>{formatDateTime(entry.at)}</td>
                  <td>{entry.actor}</td>
                  <td className="mono">{entry.action}</td>
                  <td>{entry.subjectType} <span className="mono">{entry.subjectId}</span></td>
                  <td><Change entry={entry} /></td>
                  <td>{entry.detail}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      ) : null}
      {audit.hasNextPage ? <Button style={{ marginTop: 12 }} onClick={() => void audit.fetchNextPage()}>Older entries</Button> : null}
    </>
  );
}
