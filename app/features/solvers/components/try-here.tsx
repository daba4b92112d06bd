import { useMemo } from 'react';
import { Button } from '../../../components/ui/button';
import { ErrorPanel, Loading } from '../../../components/ui/notices';
import { formatPercent } from '../../../lib/format';
import { defaultLadder } from '../../../../shared/domain/ladder';
import type { Configuration } from '../../../../shared/contracts/solvers';
import { findMethod } from '../model/solver-form';
import { PreviewOn } from './preview-on';
import { PreviewPanel } from './preview-panel';
import type { StabilityItem } from './stability-section';
import { useFit } from './use-fit';
import { usePreview } from './use-preview';
import { usePreviewTarget } from './use-preview-target';

/** The configuration at work in the reader's browser; no account is needed. */
export function TryHere({ items, configuration, noise, onClose }: { items: readonly StabilityItem[]; configuration: Configuration; noise: number; onClose: () => void }) {
  const open = useMemo(() => items.filter((i) => !i.phantom.sealed).map((i) => ({ ...i.phantom, levels: i.levels.map((l) => l.level) })), [items]);
  const method = findMethod(configuration.method);
  const families = method?.capabilities.families ?? [];
  const on = usePreviewTarget(open.length ? open : null, families);
  const { target, phantom } = on;
  const levels = open.find((p) => p.slug === target?.slug)?.levels ?? defaultLadder;
  const fit = useFit(null, phantom);
  const unfit = method ? fit.reasonOf(method) : 'This version of the code does not know the method.';
  const preview = usePreview({ phantom: unfit === null ? phantom : null, configuration, noise, levels, seed: 1 });
  return (
    <section className="sec" id="try">
      <header><h2>Here, at {formatPercent(noise)}</h2><p>draw 1 of seed 1, computed in this browser</p></header>
      <div className="sheet try">
        <PreviewOn id="try" target={on} families={families}><Button onClick={onClose} style={{ marginLeft: 'auto' }}>Close</Button></PreviewOn>
        {phantom && unfit === null ? <PreviewPanel phantom={phantom} preview={preview} noise={noise} levels={levels} others={[]} stale={false} /> : (
          <div className="pad">{on.error ? <ErrorPanel error={on.error} onRetry={on.retry} /> : phantom && unfit ? <p className="sm">{unfit}</p> : target || on.family?.pending ? <Loading label="Fetching the phantom" disc /> : <p className="sm">No phantom of a family that it serves is published to try it on.</p>}</div>
        )}
      </div>
    </section>
  );
}
