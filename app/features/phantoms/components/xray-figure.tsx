import type { XrayGeometry } from '../../../../shared/domain/geometry/x-ray';
import type { TruthDefinition } from '../../../../shared/domain/truth-definition';
import { plainNumber } from '../../../lib/problem-words';
import { ShapeOutline } from './shape-outline';

/** Body, rays of the first view with the detector, and where the views stand. To scale; of the rays at most 17 are drawn. */
export function XrayFigure({ geometry, truth }: { geometry: XrayGeometry; truth: TruthDefinition | null }) {
  const { body, beam, views, firstAngleDeg, arcDeg, detectors, detectorSpacing } = geometry;
  const { radius } = body;
  const fan = beam === 'fan';
  const source = geometry.sourceDistance ?? 0;
  const beyond = fan ? (geometry.detectorDistance ?? 0) : 1.25 * radius;
  const half = (detectors * detectorSpacing) / 2;
  const far = Math.max(1.3 * radius, fan ? source : 0, Math.hypot(beyond, half));
  const unit = 100 / far;
  const angle = (firstAngleDeg * Math.PI) / 180;
  // A fan stands with its source on the axis at `angle`; a parallel beam has its detector along `angle`, so its rays cross it.
  const axis: [number, number] = fan ? [Math.cos(angle), Math.sin(angle)] : [Math.sin(angle), -Math.cos(angle)];
  const along: [number, number] = [-axis[1], axis[0]];
  const at = (u: number, v: number): [number, number] => [(axis[0] * u + along[0] * v) * unit, -(axis[1] * u + along[1] * v) * unit];
  const text = (p: readonly [number, number]): string => `${p[0].toFixed(2)} ${p[1].toFixed(2)}`;
  const step = Math.max(1, Math.ceil(detectors / 17));
  const cells = Array.from({ length: detectors }, (_, i) => i).filter((i) => i % step === Math.floor(step / 2));
  const place = (i: number): number => (i + 0.5) * detectorSpacing - half;
  const shapes = truth?.kind === 'shapes' ? truth.shapes : [];
  const ring = (fan ? source : 1.18 * radius) * unit;
  const marks = Array.from({ length: Math.min(views, 180) }, (_, k) => firstAngleDeg + (k * arcDeg * Math.ceil(views / 180)) / views).filter((deg) => deg < firstAngleDeg + arcDeg);
  return (
    <svg className="geofig" viewBox="-106 -106 212 224" role="img" aria-label={`Disc with the rays of the first of ${views} ${beam} views over ${plainNumber(arcDeg)} degrees${shapes.length ? `, outlines of ${shapes.length} shapes` : ''}`}>
      <circle r={radius * unit} fill="var(--inset)" />
      <g stroke="var(--petrol)" strokeWidth=".8" opacity=".8">
        {cells.map((i) => {
          const [x1, y1] = fan ? at(source, 0) : at(beyond, place(i));
          const [x2, y2] = at(-beyond, place(i));
          return <line key={i} x1={x1} y1={y1} x2={x2} y2={y2} />;
        })}
      </g>
      {shapes.map((shape, i) => <ShapeOutline key={i} shape={shape} scale={unit} />)}
      <circle r={radius * unit} fill="none" stroke="var(--ink)" strokeWidth="1" />
      <path d={`M${text(at(-beyond, -half))}L${text(at(-beyond, half))}`} stroke="var(--ink)" strokeWidth="3.4" />
      {fan ? <circle cx={at(source, 0)[0]} cy={at(source, 0)[1]} r="3.2" fill="var(--petrol)" /> : null}
      <g stroke="var(--ink-2)" strokeWidth=".9">
        {marks.map((deg) => {
          const t = (deg * Math.PI) / 180;
          return <line key={deg} x1={Math.cos(t) * (ring - 2)} y1={-Math.sin(t) * (ring - 2)} x2={Math.cos(t) * (ring + 2)} y2={-Math.sin(t) * (ring + 2)} />;
        })}
      </g>
      <text y="115" textAnchor="middle" fontSize="6.6" fill="var(--ink-2)">diameter {plainNumber(2000 * radius)} mm</text>
    </svg>
  );
}
