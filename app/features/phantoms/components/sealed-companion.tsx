import { useState } from 'react';
import { Link } from 'react-router-dom';
import { Button } from '../../../components/ui/button';
import { Dialog } from '../../../components/ui/dialog';
import { SealedDisc } from '../../../components/ui/notices';
import { Seal } from '../../../components/ui/seal';
import { formatDate } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import { usePhantoms } from '../api/list-phantoms';

/** A sealed phantom of the same group and kind: results on it cannot have been tuned on its truth. */
export function SealedCompanion({ detail }: { detail: PhantomDetail }) {
  const list = usePhantoms({ group: detail.group.slug });
  const [open, setOpen] = useState(false);
  const companion = list.data?.items.find((p) => p.slug !== detail.slug && p.current.sealed && p.line === detail.line);
  if (!companion) return null;
  return (
    <>
      <div className="sh gap-top"><h2>Sealed companion</h2></div>
      <div className="sheet pad comp">
        <SealedDisc size={64} />
        <div>
          <b><Link to={paths.phantom(companion.slug)}>{companion.id}, {companion.name}</Link></b>
          <p className="sm">Same geometry, truth withheld{companion.current.sealedUntil ? `. Opens on ${formatDate(`${companion.current.sealedUntil}T12:00:00Z`)}` : ''}. Its hash was published on the day it was sealed.</p>
        </div>
        <Button onClick={() => setOpen(true)}>Verify hash</Button>
      </div>
      <Dialog open={open} onClose={() => setOpen(false)} title={`Hash of ${companion.name}, version ${companion.current.n}`} actions={<Button onClick={() => setOpen(false)}>Close</Button>}>
        <div style={{ display: 'grid', gridTemplateColumns: '72px 1fr', gap: 14, alignItems: 'center', margin: '12px 0' }}>
          <Seal hash={companion.current.contentHash} size={72} />
          <code className="mono" style={{ overflowWrap: 'anywhere' }}>{companion.current.contentHash}</code>
        </div>
        <p>SHA-256 over the canonical JSON of the definition: keys sorted, no spaces. Once the truth opens, hash the definition from its download and compare. Published {formatDate(companion.current.publishedAt ?? companion.current.createdAt)}.</p>
      </Dialog>
    </>
  );
}
