import { placedVertices, shapeNumbers, type DraftShape } from '../model/draft-shape';
import type { Grip } from '../model/shape-drag';

interface OverlayProps {
  readonly shapes: readonly DraftShape[];
  readonly selected: string | null;
  /** Drawing units per mm. */
  readonly scale: number;
}

/** White over ink, so that a stroke holds on any value. The editor reads `data-grip` and `data-shape` of what was pressed. */
export function ShapeOverlay({ shapes, selected, scale }: OverlayProps) {
  return (
    <>
      {shapes.map((shape) => (
        <Outline key={shape.id} shape={shape} on={shape.id === selected} scale={scale} />
      ))}
    </>
  );
}

const handle = (shape: DraftShape, grip: Grip) => ({ 'data-shape': shape.id, 'data-grip': JSON.stringify(grip), className: 'h' });

function Outline({ shape, on, scale }: { shape: DraftShape; on: boolean; scale: number }) {
  const n = shapeNumbers(shape);
  if (!Number.isFinite(n.x) || !Number.isFinite(n.y)) return null;
  const white = { fill: 'none', stroke: '#fff', strokeWidth: on ? 2.6 : 1.4, opacity: on ? 1 : 0.75 };
  const ink = { fill: 'transparent', stroke: '#14201f', strokeWidth: 1, strokeDasharray: on ? undefined : '3 2' };
  const body = handle(shape, { part: 'body' });
  if (shape.kind === 'polygon') {
    const points = placedVertices(n);
    if (points.some(([x, y]) => !Number.isFinite(x) || !Number.isFinite(y))) return null;
    const text = points.map(([x, y]) => `${x * scale},${-y * scale}`).join(' ');
    return (
      <g>
        <polygon points={text} {...white} />
        <polygon points={text} {...ink} {...body} />
        <g transform={`translate(${n.x * scale} ${-n.y * scale})`}><Cross /></g>
        {on ? points.map(([x, y], index) => <Square key={index} x={x * scale} y={-y * scale} grip={handle(shape, { part: 'vertex', index })} />) : null}
      </g>
    );
  }
  const a = n.a * scale;
  const b = n.b * scale;
  if (!(a > 0) || !(b > 0)) return null;
  const place = `translate(${n.x * scale} ${-n.y * scale})`;
  if (shape.kind === 'annulus') {
    return (
      <g transform={place}>
        <circle r={b} {...white} />
        <circle r={a} {...white} />
        <circle r={b} {...ink} {...body} />
        <circle r={a} {...ink} {...body} />
        <Cross />
        {on ? <><Square x={a} y={0} grip={handle(shape, { part: 'a' })} /><Square x={0} y={-b} grip={handle(shape, { part: 'b' })} /></> : null}
      </g>
    );
  }
  return (
    <g transform={`${place} rotate(${Number.isFinite(n.angle) ? -n.angle : 0})`}>
      <ellipse rx={a} ry={b} {...white} />
      <ellipse rx={a} ry={b} {...ink} {...body} />
      <Cross />
      {on ? (
        <>
          <line x1={a} x2={a + 15} y1={0} y2={0} stroke="#14201f" strokeWidth=".8" />
          <Square x={a} y={0} grip={handle(shape, { part: 'a' })} />
          <Square x={0} y={-b} grip={handle(shape, { part: 'b' })} />
          <circle cx={a + 15} r="4.4" fill="#fbfcfa" stroke="#14201f" strokeWidth="1.3" {...handle(shape, { part: 'angle' })} />
        </>
      ) : null}
    </g>
  );
}

function Cross() {
  return (
    <g pointerEvents="none">
      <path d="M-5 0H5M0-5V5" stroke="#fff" strokeWidth="2.6" />
      <path d="M-5 0H5M0-5V5" stroke="#14201f" strokeWidth="1.1" />
    </g>
  );
}

function Square({ x, y, grip }: { x: number; y: number; grip: ReturnType<typeof handle> }) {
  return <rect x={x - 4} y={y - 4} width="8" height="8" fill="#fbfcfa" stroke="#14201f" {...grip} />;
}
