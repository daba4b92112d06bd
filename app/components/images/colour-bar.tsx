import type { ReactNode } from 'react';
import type { MapName } from './colour-maps';

/** The scale of one or several images: ramp and its values from low to high. */
export function ColourBar({ map = 'sequential', labels, width, label }: { map?: MapName; labels: readonly ReactNode[]; width?: number | string; label?: string }) {
  return (
    <div className="cbar" style={{ width }} role="img" aria-label={label ?? 'Colour scale'}>
      <i className={map === 'sequential' ? 'seq' : 'div'} />
      <div>{labels.map((l, i) => <span key={i}>{l}</span>)}</div>
    </div>
  );
}
