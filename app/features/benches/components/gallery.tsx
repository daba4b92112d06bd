import { BodyImage } from '../../../components/images/body-image';
import type { ElectrodeLayout } from '../../../components/images/electrode-layout';
import { ColourBar, scaleTexts } from '../../../components/images/colour-bar';
import type { Picture } from '../../../components/images/pixels';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { formatNumber } from '../../../lib/format';
import { withUnit } from '../../../lib/problem-words';
import type { Body } from '../../../../shared/domain/body';

export interface GalleryItem {
  key: string;
  glyph: number | null;
  name: string;
  reading: string;
  /** Null while it loads or where there is none. */
  picture: Picture | null;
  note?: string;
}

/** Truth and the reconstructions of the same draw level on one scale. */
export function Gallery({ items, low, high, background, unit, electrodes, body }: { items: readonly GalleryItem[]; low: number; high: number; background: number; unit: string; electrodes?: ElectrodeLayout | null; body?: Body | undefined }) {
  return (
    <div className="sheet pad">
      <div className="gal">
        {items.map((item) => (
          <figure key={item.key}>
            <BodyImage label={item.picture ? `${item.name}, ${item.reading}` : `${item.name}: no image`} picture={item.picture} body={body} under={item.key === 'truth' ? null : (items[0]?.picture ?? null)} low={low} high={high} electrodes={electrodes} />
            <figcaption>
              <b>{item.glyph === null ? null : <SolverGlyph index={item.glyph} size={13} />}{item.name}</b>
              <span>{item.note ?? item.reading}</span>
            </figcaption>
          </figure>
        ))}
      </div>
      <div style={{ marginTop: 14 }}>
        {body?.kind === 'interval' ? <p className="sm">Dashed: ground truth. All curves share one scale.</p> : <ColourBar width={300} labels={scaleTexts(low, high, background, unit)} label={`Colour scale from ${formatNumber(low, 2)} to ${withUnit(formatNumber(high, 2), unit)}`} />}
      </div>
    </div>
  );
}
