import { formatNumber } from '../../lib/format';
import { bandPath, linePath, Plot } from './plot';

export interface CutPoint {
  /** Place along the cut from A (negative) to B, m; of a function of one variable, its variable. */
  position: number;
  value: number | null;
}
export interface CutBand {
  position: number;
  low: number;
  high: number;
}

interface CutChartProps {
  label?: string;
  unit: string;
  truth: readonly CutPoint[] | null;
  /** The image shown. */
  image: readonly CutPoint[];
  /** 5 to 95 % over draws, where known. */
  band?: readonly CutBand[];
  /** The values are a function of one variable, not a cut through an image. */
  line?: boolean;
  /** Colour of the solver's line, CSS. */
  colour: string;
  height?: number;
}

/** Values along the cut from A to B: truth dashed, the image solid, the draws' range as a band. */
export function CutChart({ line = false, label = line ? 'Truth and reconstruction on one scale' : 'Values along the cut from A to B', unit, truth, image, band = [], colour, height = 292 }: CutChartProps) {
  const values = [...(truth ?? []), ...image].flatMap((p) => (p.value === null ? [] : [p.value])).concat(band.flatMap((b) => [b.low, b.high]));
  const least = values.length ? Math.min(...values) : 0;
  const most = values.length ? Math.max(...values) : 1;
  const pad = (most - least || Math.abs(most) || 1) * 0.12;
  const low = least >= 0 ? Math.max(0, least - pad) : least - pad;
  const from = image[0]?.position ?? -1;
  const to = image[image.length - 1]?.position ?? 1;
  // The centre stands at 0; a body may reach farther to one side.
  const ticks: [number, string][] | undefined = line ? undefined : [[from, 'A'], [from / 2, '¼'], [0, 'centre'], [to / 2, '¾'], [to, 'B']];
  const every = Math.max(1, Math.floor(image.length / 12));
  return (
    <Plot
      label={label} height={height} margin={{ left: 40, right: 8, top: 8, bottom: 30 }}
      x={{ low: from, high: to, ticks }} y={{ low, high: most + pad, label: unit }}
      tableHidden
      table={{
        caption: label, columns: [line ? 'x' : 'Place, mm', 'Truth', line ? 'Reconstruction' : 'Image'],
        rows: image.filter((_, i) => i % every === 0).map((p, i) => [formatNumber(line ? p.position : p.position * 1000), formatNumber(truth?.[i * every]?.value ?? null), formatNumber(p.value)]),
      }}
    >
      {(a) => (
        <g clipPath={a.clip}>
          {band.length ? <path d={bandPath(band.map((b) => [a.x(b.position), a.y(b.high)]), band.map((b) => [a.x(b.position), a.y(b.low)]))} fill={colour} opacity=".22" /> : null}
          {truth ? <path d={linePath(truth.map((p) => (p.value === null ? null : [a.x(p.position), a.y(p.value)])))} fill="none" stroke="var(--ink)" strokeWidth="1.8" strokeDasharray="6 3" /> : null}
          <path d={linePath(image.map((p) => (p.value === null ? null : [a.x(p.position), a.y(p.value)])))} fill="none" stroke={colour} strokeWidth="2.4" />
        </g>
      )}
    </Plot>
  );
}
