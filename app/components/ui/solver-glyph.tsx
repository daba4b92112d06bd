import { glyphColour, glyphShape } from '../../../shared/domain/glyphs';

/** Shapes and colours of the solvers: colour repeats what the shape says. */
export const markerShapes = ['circle', 'square', 'triangle', 'diamond', 'triangle-down', 'hexagon', 'cross', 'plus'] as const;
export type MarkerShape = (typeof markerShapes)[number];

export interface SolverLook {
  shape: MarkerShape;
  /** CSS colour, a token. */
  colour: string;
}

/** Look of the solver with this mark. */
export function solverLook(index: number): SolverLook {
  return { shape: markerShapes[glyphShape(index)] ?? 'circle', colour: `var(--s${glyphColour(index) + 1})` };
}

interface MarkerProps {
  shape: MarkerShape;
  x: number;
  y: number;
  r: number;
  fill?: string;
  stroke?: string;
  strokeWidth?: number;
  fillOpacity?: number;
}

/** A marker inside an SVG, centred at x, y. */
export function Marker({ shape, x, y, r, ...paint }: MarkerProps) {
  const w = r * 0.42;
  const bars = `M${x - w} ${y - r * 1.2}H${x + w}V${y - w}H${x + r * 1.2}V${y + w}H${x + w}V${y + r * 1.2}H${x - w}V${y + w}H${x - r * 1.2}V${y - w}H${x - w}Z`;
  switch (shape) {
    case 'circle':
      return <circle cx={x} cy={y} r={r} {...paint} />;
    case 'square':
      return <rect x={x - r * 0.9} y={y - r * 0.9} width={r * 1.8} height={r * 1.8} {...paint} />;
    case 'triangle':
      return <path d={`M${x} ${y - r * 1.15}L${x + r * 1.1} ${y + r * 0.85}H${x - r * 1.1}Z`} {...paint} />;
    case 'triangle-down':
      return <path d={`M${x} ${y + r * 1.15}L${x + r * 1.1} ${y - r * 0.85}H${x - r * 1.1}Z`} {...paint} />;
    case 'diamond':
      return <path d={`M${x} ${y - r * 1.25}L${x + r * 1.25} ${y}L${x} ${y + r * 1.25}L${x - r * 1.25} ${y}Z`} {...paint} />;
    case 'hexagon':
      return <path d={`M${x - r * 1.1} ${y}L${x - r * 0.55} ${y - r}H${x + r * 0.55}L${x + r * 1.1} ${y}L${x + r * 0.55} ${y + r}H${x - r * 0.55}Z`} {...paint} />;
    case 'cross':
      return <path transform={`rotate(45 ${x} ${y})`} d={bars} {...paint} />;
    case 'plus':
      return <path d={bars} {...paint} />;
  }
}

/** The solver's mark in text and tables. */
export function SolverGlyph({ index, size = 14 }: { index: number; size?: number }) {
  const { shape, colour } = solverLook(index);
  return (
    <svg className="mk" width={size} height={size} viewBox="-8 -8 16 16" aria-hidden="true">
      <Marker shape={shape} x={0} y={0} r={5} fill={colour} />
    </svg>
  );
}
