import { electrodeAngle } from '../model/geometry-facts';
import { pairCurrentLines } from '../model/current-lines';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { TruthDefinition } from '../../../../shared/domain/truth-definition';
import { formatNumber } from '../../../lib/format';
import { ShapeOutline } from './shape-outline';

const R = 100;
const lines = 8;
/** Shares of the current that run beyond the lines of a pair. */
export const shares = [0.01, 0.03, 0.06, 0.12, 0.2, 0.35, 0.5, 0.75] as const;

/**
 * Electrodes, outlines and current lines. The lines are exact for a uniform disc and point electrodes (a pair), or for a
 * current density cos(theta) on the edge (trigonometric): schematic for the body as it is.
 */
export function GeometryFigure({ geometry, truth }: { geometry: EitGeometry; truth: TruthDefinition | null }) {
  const angle = (l: number): number => electrodeAngle(l, geometry.electrodes, geometry.firstElectrodeDeg, geometry.numbering);
  const half = (Math.PI * geometry.electrodeCoverage) / geometry.electrodes;
  const at = (t: number, r: number): string => `${(r * Math.cos(t)).toFixed(2)} ${(-r * Math.sin(t)).toFixed(2)}`;
  const pair = geometry.pattern === 'adjacent';
  const scale = R / geometry.body.radius;
  const shapes = truth?.kind === 'shapes' ? truth.shapes : [];
  const dense = geometry.electrodes > 16;
  const diameter = `${formatNumber(geometry.body.radius * 2000, 3)} mm`;
  return (
    <svg className="geofig" viewBox="-121 -121 242 258" role="img" aria-label={`Disc with ${geometry.electrodes} electrodes, schematic current lines of ${pair ? 'the drive pair 1 and 2' : 'the first trigonometric pattern'}${shapes.length ? `, outlines of ${shapes.length} shapes` : ''}`}>
      <circle r={R} fill="var(--inset)" />
      <g fill="none" stroke="var(--petrol)" strokeWidth="1" opacity=".85">{pair ? <PairLines first={angle(0)} second={angle(1)} /> : <StraightLines direction={angle(0)} />}</g>
      {shapes.map((shape, i) => <ShapeOutline key={i} shape={shape} scale={scale} />)}
      <circle r={R} fill="none" stroke="var(--ink)" strokeWidth="1" />
      <path d="M-5 0H5M0-5V5" stroke="var(--ink-3)" strokeWidth=".6" />
      {Array.from({ length: geometry.electrodes }, (_, l) => {
        const t = angle(l);
        const on = pair && l < 2;
        return (
          <g key={l}>
            <path d={`M${at(t - half, R + 4)}A${R + 4} ${R + 4} 0 0 0 ${at(t + half, R + 4)}`} fill="none" stroke={on ? 'var(--petrol)' : 'var(--ink)'} strokeWidth={on ? 5.5 : 4} />
            <text x={113.5 * Math.cos(t)} y={-113.5 * Math.sin(t) + 2.7} textAnchor="middle" fontSize={dense ? 5.8 : 7.6} fontWeight={on ? 700 : 400} fill={on ? 'var(--petrol)' : 'var(--ink-2)'}>{l + 1}</text>
          </g>
        );
      })}
      <path d="M-100 128H-18M18 128H100M-100 124v8M100 124v8" stroke="var(--ink-2)" strokeWidth=".7" />
      <text y="130.8" textAnchor="middle" fontSize="7.8" fill="var(--ink-2)">{diameter}</text>
    </svg>
  );
}

function PairLines({ first, second }: { first: number; second: number }) {
  const p = `${(R * Math.cos(first)).toFixed(2)} ${(-R * Math.sin(first)).toFixed(2)}`;
  const q = `${(R * Math.cos(second)).toFixed(2)} ${(-R * Math.sin(second)).toFixed(2)}`;
  // Seen from the first electrode the bulk of the body lies to one side: the sweep follows the numbering.
  const clockwise = Math.sin(second - first) < 0;
  return (
    <>
      {pairCurrentLines(first, second, R, shares).map((arc, i) => (
        <path key={i} d={`M${p}A${arc.radius.toFixed(2)} ${arc.radius.toFixed(2)} 0 ${arc.large ? 1 : 0} ${arc.inside === clockwise ? 0 : 1} ${q}`} />
      ))}
    </>
  );
}

/** Current density cos(theta) from the first electrode's axis drives a uniform current: equal shares between equal spacings. */
function StraightLines({ direction }: { direction: number }) {
  const u = [Math.cos(direction), -Math.sin(direction)] as const;
  return (
    <>
      {Array.from({ length: lines - 1 }, (_, k) => {
        const offset = R * ((2 * (k + 1)) / lines - 1);
        const reach = Math.sqrt(R * R - offset * offset);
        const cx = -u[1] * offset;
        const cy = u[0] * offset;
        return <line key={k} x1={cx - u[0] * reach} y1={cy - u[1] * reach} x2={cx + u[0] * reach} y2={cy + u[1] * reach} />;
      })}
    </>
  );
}
