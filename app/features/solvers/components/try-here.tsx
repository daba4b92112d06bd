import { useMemo, useState } from 'react';
import { Button } from '../../../components/ui/button';
import { ErrorPanel, Loading } from '../../../components/ui/notices';
import { formatPercent } from '../../../lib/format';
import { defaultLadder } from '../../../../shared/domain/ladder';
import type { Configuration } from '../../../../shared/contracts/solvers';
import { usePreviewPhantom } from '../api/bench-data';
import { previewPhantom } from '../model/preview-data';
import { PreviewPanel } from './preview-panel';
import type { StabilityItem } from './stability-section';
import { usePreview } from './use-preview';

/** The configuration at work in the reader's browser; no account is needed. */
export function TryHere({ items, configuration, noise, onClose }: { items: readonly StabilityItem[]; configuration: Configuration; noise: number; onClose: () => void }) {
  const open = items.filter((i) => !i.phantom.sealed);
  const [chosen, setChosen] = useState('');
  const item = open.find((i) => i.phantom.slug === chosen) ?? open[0];
  const { detail, simulation } = usePreviewPhantom(item?.phantom.slug ?? '', item?.phantom.version ?? 0);
  const phantom = useMemo(() => (detail.data && simulation.data ? previewPhantom(detail.data, simulation.data) : null), [detail.data, simulation.data]);
  const levels = item?.levels.map((l) => l.level) ?? defaultLadder;
  const preview = usePreview({ phantom, configuration, noise, levels, seed: 1 });
  return (
    <section className="sec" id="try">
      <header><h2>Here, at {formatPercent(noise)}</h2><p>draw 1 of seed 1, computed in this browser</p></header>
      <div className="sheet try">
        <div className="pvon">
          {open.length > 1 ? <><label className="sm" htmlFor="try-phantom">on</label><select className="t" id="try-phantom" value={item?.phantom.slug ?? ''} onChange={(e) => setChosen(e.target.value)}>{open.map((i) => <option key={i.run} value={i.phantom.slug}>{i.phantom.name}</option>)}</select></> : <span className="sm">{item ? `on ${item.phantom.name}` : ''}</span>}
          <Button onClick={onClose} style={{ marginLeft: 'auto' }}>Close</Button>
        </div>
        {phantom ? <PreviewPanel phantom={phantom} preview={preview} noise={noise} levels={levels} others={[]} stale={false} /> : (
          <div className="pad">{simulation.isError ? <ErrorPanel error={simulation.error} onRetry={() => void simulation.refetch()} /> : item ? <Loading label="Fetching the phantom" disc /> : <p className="sm">It has no finished run on an open phantom to try it on.</p>}</div>
        )}
      </div>
    </section>
  );
}
