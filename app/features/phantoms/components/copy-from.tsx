import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { Field } from '../../../components/ui/field';
import { Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { familyNames } from '../../../../shared/domain/families';
import { getPhantomQueryOptions } from '../api/get-phantom';
import { usePhantoms } from '../api/list-phantoms';
import { formFromVersion } from '../model/form-from-version';
import type { PhantomForm } from '../model/phantom-form';

/** A phantom the reader may read, taken as the start of the form. A sealed truth stays behind. */
export function CopyFrom({ onCopy }: { onCopy: (form: PhantomForm) => void }) {
  const [q, setQ] = useState('');
  const list = usePhantoms({ q: q.trim() || undefined });
  const client = useQueryClient();
  const [error, setError] = useState<unknown>(null);
  const copy = (slug: string) => {
    client.query({ ...getPhantomQueryOptions(slug), staleTime: 'static' }).then((detail) => onCopy(formFromVersion('', detail.version)), setError);
  };
  return (
    <div style={{ display: 'grid', gap: 12, marginTop: 10 }}>
      <Field label="Name or identifier" type="search" value={q} onChange={(e) => setQ(e.target.value)} />
      {error ? <ErrorPanel error={error} /> : null}
      {list.isPending ? <Loading label="Fetching phantoms" /> : list.isError ? <ErrorPanel error={list.error} onRetry={() => void list.refetch()} /> : list.data.items.length === 0 ? (
        <Empty title="No phantom of that name">Clear the field to see all.</Empty>
      ) : (
        <ul className="copylist">
          {list.data.items.map((p) => (
            <li key={p.id}><button type="button" onClick={() => copy(p.slug)}><b>{p.name}</b><span className="sm">{p.id}, {familyNames[p.family].name.toLowerCase()}: {p.line}{p.current.sealed ? ', truth sealed' : ''}</span></button></li>
          ))}
        </ul>
      )}
    </div>
  );
}
