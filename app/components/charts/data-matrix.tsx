import { useEffect, useRef } from 'react';
import { useTheme } from '../../lib/theme';
import { formatNumber } from '../../lib/format';
import { ColourBar } from '../images/colour-bar';
import { colourMap, type MapName } from '../images/colour-maps';

interface DataMatrixProps {
  label: string;
  /** Row-major, `rows` patterns by `columns` values. */
  values: readonly number[];
  rows: number;
  columns: number;
  unit: string;
  map?: MapName;
  rowName?: string;
  columnName?: string;
}

/** Data as a matrix, one row a drive pattern. Symmetric limits for the diverging map. */
export function DataMatrix({ label, values, rows, columns, unit, map = 'sequential', rowName = 'drive pattern', columnName = 'measurement' }: DataMatrixProps) {
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
      image.data.set([...colour, 255], 4 * i);
    });
    context.putImageData(image, 0, 0);
  }, [values, rows, columns, map, dark, low, high]);
  return (
    <div className="dmat">
      <div role="img" aria-label={`${label}: ${rows} by ${columns}, from ${formatNumber(least)} to ${formatNumber(most)} ${unit}`}>
        <canvas ref={canvas} aria-hidden="true" />
      </div>
      <p className="sm">rows: {rowName}, columns: {columnName}</p>
      <ColourBar map={map} labels={map === 'diverging' ? [formatNumber(low, 2), '0', `${formatNumber(high, 2)} ${unit}`] : [formatNumber(low, 2), `${formatNumber(high, 2)} ${unit}`]} width={300} />
    </div>
  );
}
