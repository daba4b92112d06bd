import { useEffect, useRef } from 'react';
import { useTheme } from '../../lib/theme';
import { formatNumber } from '../../lib/format';
import { withUnit } from '../../lib/problem-words';
import { ColourBar } from '../images/colour-bar';
import { colourMap, type MapName } from '../images/colour-maps';

interface DataMatrixProps {
  label: string;
  /** Row-major, `rows` groups by `columns` values. */
  values: readonly number[];
  rows: number;
  columns: number;
  unit: string;
  map?: MapName;
  /** What a row and a column are; nothing is said without them. */
  rowName?: string;
  columnName?: string;
  /** Width over height of the drawing; square where absent. */
  aspect?: number;
  /** The first row lies at the bottom. */
  fromBelow?: boolean;
}

/** Data as a picture, one row a group. Symmetric limits for the diverging map. */
export function DataMatrix({ label, values, rows, columns, unit, map = 'sequential', rowName, columnName, aspect, fromBelow = false }: DataMatrixProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const dark = useTheme() === 'dark';
  const finite = values.filter((v) => Number.isFinite(v));
  const least = finite.length ? Math.min(...finite) : 0;
  const most = finite.length ? Math.max(...finite) : 1;
  const reach = Math.max(Math.abs(least), Math.abs(most)) || 1;
  const low = map === 'diverging' ? -reach : least;
  const high = map === 'diverging' ? reach : most > least ? most : least + 1;
  useEffect(() => {
    const node = canvas.current;
    const context = node?.getContext('2d');
    if (!node || !context) return;
    node.width = columns;
    node.height = rows;
    const image = context.createImageData(columns, rows);
    const colours = colourMap(map, dark);
    values.forEach((v, i) => {
      if (!Number.isFinite(v)) return;
      const colour = colours[Math.min(255, Math.max(0, Math.round(((v - low) / (high - low)) * 255)))] ?? [0, 0, 0];
      const row = Math.floor(i / columns);
      image.data.set([...colour, 255], 4 * ((fromBelow ? rows - 1 - row : row) * columns + (i % columns)));
    });
    context.putImageData(image, 0, 0);
  }, [values, rows, columns, map, dark, low, high, fromBelow]);
  return (
    <div className="dmat">
      <div role="img" aria-label={`${label}: ${rows} by ${columns}, from ${formatNumber(least)} to ${formatNumber(most)}${unit ? ` ${unit}` : ''}`}>
        <canvas ref={canvas} aria-hidden="true" style={aspect ? { aspectRatio: String(aspect) } : undefined} />
      </div>
      {rowName && columnName ? <p className="sm">rows: {rowName}, columns: {columnName}</p> : <p className="sm" />}
      <ColourBar map={map} labels={map === 'diverging' ? [formatNumber(low, 2), '0', withUnit(formatNumber(high, 2), unit)] : [formatNumber(low, 2), withUnit(formatNumber(high, 2), unit)]} width={300} />
    </div>
  );
}
