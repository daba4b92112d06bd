import type { ReactNode } from 'react';
import { formatNumber } from '../../lib/format';
import { withUnit } from '../../lib/problem-words';
import type { MapName } from './colour-maps';

/** Texts of a scale of values: the background stands where it lies, at an end or in the middle. */
export function scaleTexts(low: number, high: number, background: number, unit: string): string[] {
  const top = withUnit(formatNumber(high, 2), unit);
  const share = (background - low) / (high - low);
  if (share < 0.08) return [`${formatNumber(background, 2)} background`, top];
  return [formatNumber(low, 2), `${formatNumber(background, 2)} background`, top];
}

/** The scale of one or several images: ramp and its values from low to high. */
export function ColourBar({ map = 'sequential', labels, width, label }: { map?: MapName; labels: readonly ReactNode[]; width?: number | string; label?: string }) {
  return (
    <div className="cbar" style={{ width }} role="img" aria-label={label ?? 'Colour scale'}>
      <i className={map === 'sequential' ? 'seq' : 'div'} />
      <div>{labels.map((l, i) => <span key={i}>{l}</span>)}</div>
    </div>
  );
}
