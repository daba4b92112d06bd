import { AnnotatedStability } from '../../../components/charts/annotated-stability';
import type { Curve } from '../../../components/charts/stability-chart';
import { axisFact, axisView } from '../../../lib/axis-words';
import { formatError, formatNumber, formatShortDate } from '../../../lib/format';
import type { SolverStability } from '../../../../shared/contracts/solvers';
import { BodyImage } from '../../../components/images/body-image';
import { SealedDisc } from '../../../components/ui/notices';
import { usePreviewPhantom } from '../api/bench-data';
import { useMemo } from 'react';
import { previewPhantom } from '../model/preview-data';

export type StabilityItem = SolverStability['items'][number];

const curveOf = (item: StabilityItem, glyph: number): Curve => ({
  id: item.run, glyph, name: item.phantom.name, breakdown: item.sheet.breakdown?.value ?? null,
  points: item.levels.map((l) => ({ level: l.level, median: l.median, low: l.p05, high: l.p95 })),
});
const range = (i: { low: number; high: number } | null, text: (v: number) => string): string => (i ? `${text(i.low)} to ${text(i.high)}` : '');

/** The annotated curve of one phantom; the others grey behind it. */
export function StabilitySection({ items, chosen, onChoose, noise, glyph }: { items: readonly StabilityItem[]; chosen: StabilityItem; onChoose: (run: string) => void; noise: number; glyph: number }) {
  const { sheet } = chosen;
  const axis = axisView(chosen.axis);
  return (
    <div className="sheet stab">
      <div>
        <div style={{ padding: '12px 14px 10px 6px' }}>
          <AnnotatedStability
            label={`Relative L2 error on ${chosen.phantom.name} against ${axis.isNoise ? 'noise' : axis.label}, with fitted exponent, floor and breakdown`} curve={curveOf(chosen, glyph)} others={items.filter((i) => i.run !== chosen.run && i.axis.key === chosen.axis.key).map((i) => curveOf(i, glyph))}
            levels={chosen.levels.map((l) => l.level)} noise={noise} modelFloor={chosen.modelErrorFloor} trivial={chosen.trivial} exponent={sheet.exponent} errorFloor={sheet.floor} breakdown={sheet.breakdown} breakdownNote={sheet.breakdownNote}
          />
          {sheet.reason ? <p className="sm" style={{ padding: '4px 0 0 42px' }}>{sheet.reason}</p> : null}
        </div>
      </div>
      <div className="scrollx" role="group" aria-label="Phantom">
        {items.map((item) => (
          <button key={item.run} type="button" className="phb" aria-pressed={item.run === chosen.run} onClick={() => onChoose(item.run)}>
            <PhantomPicture item={item} />
            <span><b>{item.phantom.name}</b><span className="sm">{item.phantom.id}{axisFact(item.axis) ? `, ${axisFact(item.axis)?.toLowerCase()}` : ''}{item.phantom.sealed ? `, sealed${item.phantom.sealedUntil ? ` until ${formatShortDate(`${item.phantom.sealedUntil}T12:00:00Z`)}` : ''}` : ''}</span></span>
            <span className="k">
              <span>{item.sheet.model === 'logarithmic' ? 'exponent κ' : 'exponent ν'}<b>{item.sheet.exponent ? formatNumber(item.sheet.exponent.value, 2) : '–'}</b>{range(item.sheet.exponent, (v) => formatNumber(v, 2))}</span>
              <span>floor b<b>{item.sheet.floor ? formatError(item.sheet.floor.value) : '–'}</b>{range(item.sheet.floor, formatError)}</span>
              <span>breakdown<b>{item.sheet.breakdown ? axisView(item.axis).format(item.sheet.breakdown.value) : item.sheet.breakdownNote === 'throughout' ? 'throughout' : `> ${axisView(item.axis).format(item.levels.at(-1)?.level ?? 0.3)}`}</b>{item.sheet.breakdown ? range(item.sheet.breakdown, axisView(item.axis).format) : item.sheet.breakdownNote === 'throughout' ? 'worse than trivial' : 'beyond the ladder'}</span>
            </span>
          </button>
        ))}
      </div>
    </div>
  );
}

function PhantomPicture({ item }: { item: StabilityItem }) {
  return item.phantom.sealed ? <SealedDisc size={58} /> : <OpenPicture slug={item.phantom.slug} version={item.phantom.version} />;
}
function OpenPicture({ slug, version }: { slug: string; version: number }) {
  const { detail, simulation } = usePreviewPhantom(slug, version);
  const phantom = useMemo(() => (detail.data && simulation.data ? previewPhantom(detail.data, simulation.data) : null), [detail.data, simulation.data]);
  return <span style={{ display: 'block', width: 58 }} aria-hidden="true"><BodyImage label="" picture={phantom?.truth ?? null} body={phantom?.grid.body} low={phantom?.range[0] ?? 0} high={phantom?.range[1] ?? 1} /></span>;
}
