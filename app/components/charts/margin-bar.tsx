import { formatNumber } from '../../lib/format';

const width = 204;
const inset = 4;
const decades = 16;

/** Place of a value on the axis from 10⁻¹⁶ to 1; zero and what lies beyond stand at the ends. */
export function marginPlace(value: number): number {
  const share = value > 0 ? (Math.log10(value) + decades) / decades : 0;
  return inset + Math.min(1, Math.max(0, share)) * (width - 2 * inset);
}

/** Gap as a mark, bound as the bar's end, log axis; a gap beyond the bound is a brick square. */
export function MarginBar({ gap, bound, failed }: { gap: number | null; bound: number; failed: boolean }) {
  const end = marginPlace(bound);
  const at = gap === null ? null : marginPlace(gap);
  return (
    <svg className="margin-bar" width={width} height="22" viewBox={`0 0 ${width} 22`} role="img" aria-label={`${gap === null ? 'no gap yet' : `gap ${formatNumber(gap, 2)}`}, bound ${formatNumber(bound, 1)}`}>
      <line x1={inset} x2={width - inset} y1="11" y2="11" stroke="var(--hair)" />
      <rect x={inset} y="8" width={end - inset} height="6" fill={failed ? 'var(--brick)' : 'var(--petrol)'} opacity="0.2" />
      <line x1={end} x2={end} y1="3" y2="19" stroke="var(--ink)" strokeWidth="1.5" />
      {at === null ? null : failed ? <rect x={at - 4.5} y="6.5" width="9" height="9" fill="var(--brick)" /> : <circle cx={at} cy="11" r="4.6" fill="var(--petrol)" />}
    </svg>
  );
}
