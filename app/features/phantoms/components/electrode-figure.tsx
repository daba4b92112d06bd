import { bodyEdge, bodyReach } from '../../../components/images/body-outline';
import { electrodeLayout } from '../../../components/images/electrode-layout';
import { pairCurrentLines } from '../model/current-lines';
import { drivenPair } from '../../../../solvers/problems/electrical-impedance/patterns';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { TruthDefinition } from '../../../../shared/domain/truth-definition';
import { formatNumber } from '../../../lib/format';
import { ShapeOutline } from './shape-outline';

const R = 100;
const lines = 8;
/** Shares of the current that run beyond the lines of a pair. */
export const shares = [0.01, 0.03, 0.06, 0.12, 0.2, 0.35, 0.5, 0.75] as const;

/** Electrodes, from 0, that the first pattern drives with the largest currents. */
function firstDriven(geometry: EitGeometry): readonly number[] {
  const pair = drivenPair(geometry, 0);
  if (pair) return pair;
  const row = geometry.currents?.[0];
  return row ? row.flatMap((v, l) => (v === 0 ? [] : [l])) : [];
}

/** Whether the current lines of the first pattern can be drawn: a disc, and a pair or the first cosine on evenly placed electrodes. */
export function hasCurrentLines(geometry: EitGeometry): boolean {
  return geometry.body.kind === 'disc' && (drivenPair(geometry, 0) !== null || (geometry.pattern === 'trigonometric' && !geometry.electrodeAnglesDeg));
}

/**
 * Electrodes, outlines and current lines. The lines are exact for a uniform disc and point electrodes (a pair), or for a
 * current density cos(theta) on the edge (trigonometric): schematic for the body as it is.
 */
export function ElectrodeFigure({ geometry, truth }: { geometry: EitGeometry; truth: TruthDefinition | null }) {
  const { body } = geometry;
  const layout = electrodeLayout(geometry);
  const angle = (l: number): number => layout.arcs[l]?.centre ?? 0;
  const edge = bodyEdge(body);
  const scale = R / Math.max(...edge.map(([x, y]) => Math.hypot(x, y)));
  const at = (t: number, beyond: number): string => {
    const r = bodyReach(body, t) * scale + beyond;
    return `${(r * Math.cos(t)).toFixed(2)} ${(-r * Math.sin(t)).toFixed(2)}`;
  };
  const pair = drivenPair(geometry, 0);
  const driven = firstDriven(geometry);
  const drawn = hasCurrentLines(geometry);
  const shapes = truth?.kind === 'shapes' ? truth.shapes : [];
  const dense = geometry.electrodes > 16;
  const across = `${formatNumber(body.radius * 2000, 3)} mm`;
  const outline = body.kind === 'disc' ? `M${R} 0A${R} ${R} 0 1 0 ${-R} 0A${R} ${R} 0 1 0 ${R} 0Z` : `M${edge.map(([x, y]) => `${(x * scale).toFixed(2)} ${(-y * scale).toFixed(2)}`).join('L')}Z`;
  const spoken = drawn ? `, schematic current lines of ${pair ? `the drive pair ${pair[0] + 1} and ${pair[1] + 1}` : 'the first trigonometric pattern'}` : '';
  return (
    <svg className="geofig" viewBox="-121 -121 242 258" role="img" aria-label={`${body.kind === 'disc' ? 'Disc' : 'Body'} with ${geometry.electrodes} electrodes${spoken}${shapes.length ? `, outlines of ${shapes.length} shapes` : ''}`}>
      <path d={outline} fill="var(--inset)" />
      {drawn ? <g fill="none" stroke="var(--petrol)" strokeWidth="1" opacity=".85">{pair ? <PairLines first={angle(pair[0])} second={angle(pair[1])} /> : <StraightLines direction={angle(0)} />}</g> : null}
      {shapes.map((shape, i) => <ShapeOutline key={i} shape={shape} scale={scale} />)}
      <path d={outline} fill="none" stroke="var(--ink)" strokeWidth="1" />
      <path d="M-5 0H5M0-5V5" stroke="var(--ink-3)" strokeWidth=".6" />
      {layout.arcs.map(({ from, centre, to }, l) => {
        const on = driven.length <= 2 && driven.includes(l);
        const arc = Array.from({ length: 9 }, (_, k) => at(from + ((to - from) * k) / 8, 4)).join('L');
        const [x = 0, y = 0] = at(centre, 13.5).split(' ').map(Number);
        return (
          <g key={l}>
            <path d={`M${arc}`} fill="none" stroke={on ? 'var(--petrol)' : 'var(--ink)'} strokeWidth={on ? 5.5 : 4} />
            {geometry.electrodes <= 32 || l % 4 === 0 ? <text x={x} y={y + 2.7} textAnchor="middle" fontSize={dense ? 5.8 : 7.6} fontWeight={on ? 700 : 400} fill={on ? 'var(--petrol)' : 'var(--ink-2)'}>{l + 1}</text> : null}
          </g>
        );
      })}
      {body.kind === 'disc' ? (
        <>
          <path d="M-100 128H-18M18 128H100M-100 124v8M100 124v8" stroke="var(--ink-2)" strokeWidth=".7" />
          <text y="130.8" textAnchor="middle" fontSize="7.8" fill="var(--ink-2)">{across}</text>
        </>
      ) : <text y="130.8" textAnchor="middle" fontSize="7.8" fill="var(--ink-2)">mean diameter {across}</text>}
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
