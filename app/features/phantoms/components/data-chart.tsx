import { useMemo } from 'react';
import { bandPath, linePath, Plot } from '../../../components/charts/plot';
import { formatNumber } from '../../../lib/format';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { noisyFrame, voltUnit, type DataView } from '../model/noisy-data';

interface Props {
  readonly simulation: Simulation;
  readonly view: DataView;
  readonly noise: number;
  /** First pattern shown and how many. */
  readonly first: number;
  readonly count: number;
  readonly height: number;
  readonly band?: boolean;
  readonly shaded?: boolean;
  readonly xLabel?: string;
  readonly label: string;
}

/** Data pattern by pattern: line without noise, band of 90 % of the draws, dots draw 1. With one pattern the channels are named. */
export function DataChart({ simulation, view, noise, first, count, height, band = false, shaded = false, xLabel, label }: Props) {
  const data = useMemo(() => noisyFrame(simulation, view, noise), [simulation, view, noise]);
  const per = simulation.valuesPerPattern;
  const from = first * per;
  const to = Math.min((first + count) * per, data.clean.length);
  let largest = 0;
  let low = 0;
  let high = 0;
  // The scale holds all patterns, so that it stays while one steps through them.
  for (let i = 0; i < data.clean.length; i++) {
    const v = data.clean[i]!;
    low = Math.min(low, v - data.half);
    high = Math.max(high, v + data.half);
    largest = Math.max(largest, Math.abs(v));
  }
  const { factor, unit } = voltUnit(largest);
  const pad = (high - low) * 0.05 || factor;
  const single = count === 1;
  const every = single ? Math.ceil(per / 6) : Math.ceil(count / 16);
  const ticks = single
    ? Array.from({ length: per }, (_, i) => i).filter((i) => i % every === 0).map((i) => [from + i, simulation.channelNames[first]?.[i] ?? ''] as const)
    : Array.from({ length: count }, (_, k) => k).filter((k) => k % every === 0).map((k) => [from + k * per + (per - 1) / 2, simulation.patternNames[first + k] ?? ''] as const);
  const patterns = Array.from({ length: count }, (_, k) => first + k).filter((k) => k < simulation.patterns);
  return (
    <Plot
      label={label} height={height} margin={{ left: 46, right: 8, top: 10, bottom: xLabel ? 36 : 22 }}
      x={{ low: from - 0.6, high: to - 0.4, ticks, label: xLabel }} y={{ low: (low - pad) / factor, high: (high + pad) / factor, label: unit }}
      tableHidden={false}
      table={{
        caption: label, columns: ['Value', `without noise, ${unit}`, `draw 1, ${unit}`],
        rows: Array.from({ length: to - from }, (_, i) => [`${simulation.patternNames[first + Math.floor(i / per)] ?? ''}, ${simulation.channelNames[first + Math.floor(i / per)]?.[i % per] ?? ''}`, formatNumber(data.clean[from + i]! / factor, 4), formatNumber(data.noisy[from + i]! / factor, 4)]),
      }}
    >
      {({ x, y, top, bottom, clip }) => (
        <g>
          {shaded ? patterns.filter((k) => k % 2 === 1).map((k) => <rect key={k} x={x(k * per - 0.5)} y={top} width={x(per) - x(0)} height={bottom - top} fill="var(--inset)" opacity=".6" />) : null}
          <g clipPath={clip}>
            {patterns.map((k) => {
              const indices = Array.from({ length: per }, (_, i) => k * per + i);
              const point = (i: number, shift = 0): [number, number] => [x(i), y((data.clean[i]! + shift) / factor)];
              return (
                <g key={k}>
                  {band && data.half > 0 ? <path d={bandPath(indices.map((i) => point(i, data.half)), indices.map((i) => point(i, -data.half)))} fill="var(--petrol)" opacity=".2" /> : null}
                  <path d={linePath(indices.map((i) => point(i)))} fill="none" stroke="var(--petrol)" strokeWidth="1.5" />
                </g>
              );
            })}
            {Array.from({ length: to - from }, (_, i) => from + i).map((i) => <circle key={i} cx={x(i)} cy={y(data.noisy[i]! / factor)} r={count > 20 ? 1.3 : 1.9} fill="var(--ink)" />)}
          </g>
        </g>
      )}
    </Plot>
  );
}
