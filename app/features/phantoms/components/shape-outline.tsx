import type { Shape } from '../../../../shared/domain/truth-definition';

/** Dashed outline of a shape in drawing units of `scale` per m, y down. */
export function ShapeOutline({ shape, scale }: { shape: Shape; scale: number }) {
  const look = { fill: 'var(--sheet)', fillOpacity: 0.7, stroke: 'var(--ink)', strokeWidth: 0.8, strokeDasharray: '3 2' };
  if (shape.kind === 'polygon') return <polygon points={shape.vertices.map(([x, y]) => `${x * scale},${-y * scale}`).join(' ')} {...look} />;
  const X = shape.x * scale;
  const Y = -shape.y * scale;
  const cross = <path d={`M${X - 3} ${Y}h6M${X} ${Y - 3}v6`} stroke="var(--ink)" strokeWidth=".7" />;
  if (shape.kind === 'annulus') return <g><circle cx={X} cy={Y} r={shape.outerRadius * scale} {...look} /><circle cx={X} cy={Y} r={shape.innerRadius * scale} {...look} fillOpacity={0} />{cross}</g>;
  return <g><ellipse cx={X} cy={Y} rx={shape.semiAxisA * scale} ry={shape.semiAxisB * scale} transform={`rotate(${-shape.angleDeg} ${X} ${Y})`} {...look} />{cross}</g>;
}
