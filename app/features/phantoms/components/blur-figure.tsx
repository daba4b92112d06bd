import type { DeblurringGeometry } from '../../../../shared/domain/geometry/deblurring';
import type { TruthDefinition } from '../../../../shared/domain/truth-definition';
import { plainNumber } from '../../../lib/problem-words';
import { pointSpreadNames } from '../model/deblurring-words';
import { ShapeOutline } from './shape-outline';

/** The picture with its outlines, and in its middle what a point becomes, to scale. */
export function BlurFigure({ geometry, truth }: { geometry: DeblurringGeometry; truth: TruthDefinition | null }) {
  const { width, height } = geometry.body;
  const unit = 100 / (Math.max(width, height) / 2);
  const a = (width / 2) * unit;
  const b = (height / 2) * unit;
  const spread = geometry.spread * unit;
  const turn = ((geometry.motionDeg ?? 0) * Math.PI) / 180;
  const shapes = truth?.kind === 'shapes' ? truth.shapes : [];
  return (
    <svg className="geofig" viewBox={`${-a - 6} ${-b - 6} ${2 * a + 12} ${2 * b + 26}`} role="img" aria-label={`Picture of ${plainNumber(1000 * width)} by ${plainNumber(1000 * height)} mm with its ${pointSpreadNames[geometry.pointSpread]} point-spread function${shapes.length ? ` and outlines of ${shapes.length} shapes` : ''}`}>
      <rect x={-a} y={-b} width={2 * a} height={2 * b} fill="var(--inset)" stroke="var(--ink)" />
      {shapes.map((shape, i) => <ShapeOutline key={i} shape={shape} scale={unit} />)}
      <g stroke="var(--petrol)" strokeWidth="1.6" fill="var(--petrol)" fillOpacity=".22">
        {geometry.pointSpread === 'gaussian' ? <><circle r={2 * spread} fillOpacity=".12" strokeDasharray="3 2" /><circle r={spread} /></> : geometry.pointSpread === 'disc' ? <circle r={spread} /> : <line x1={-spread * Math.cos(turn)} y1={spread * Math.sin(turn)} x2={spread * Math.cos(turn)} y2={-spread * Math.sin(turn)} strokeWidth="3.4" />}
      </g>
      <text y={b + 15} textAnchor="middle" fontSize="6.6" fill="var(--ink-2)">{plainNumber(1000 * width)} × {plainNumber(1000 * height)} mm</text>
    </svg>
  );
}
