import { useId } from 'react';
import type { Body } from '../../../shared/domain/body';
import { bodyReach } from './body-outline';
import type { ElectrodeLayout } from './electrode-layout';

/*
 * Marks over an image, in a box whose middle is the middle of the body, y down. `unit` is the number of drawing units a metre.
 */

/** Electrodes just outside the edge, with their numbers where asked. */
export function Electrodes({ layout, body, unit, numbered, driven }: { layout: ElectrodeLayout; body: Body; unit: number; numbered: boolean; driven: readonly number[] }) {
  const at = (t: number, beyond: number): string => {
    const r = bodyReach(body, t) * unit + beyond;
    return `${(r * Math.cos(t)).toFixed(2)} ${(-r * Math.sin(t)).toFixed(2)}`;
  };
  const steps = body.kind === 'disc' ? 6 : 10;
  return (
    <g>
      {layout.arcs.map(({ from, centre, to }, i) => {
        const on = driven.includes(i);
        const path = Array.from({ length: steps + 1 }, (_, k) => at(from + ((to - from) * k) / steps, 4)).join('L');
        const [x = 0, y = 0] = numbered ? at(centre, 13).split(' ').map(Number) : [];
        return (
          <g key={i}>
            <path d={`M${path}`} fill="none" stroke={on ? 'var(--petrol)' : 'var(--ink)'} strokeWidth={on ? 6 : 4} />
            {numbered ? <text x={x} y={y + 2.6} textAnchor="middle" fontSize="7.4" fill="var(--ink-2)">{i + 1}</text> : null}
          </g>
        );
      })}
    </g>
  );
}

export function Cut({ body, unit, angle }: { body: Body; unit: number; angle: number }) {
  const ends = ([[angle + Math.PI, 'A'], [angle, 'B']] as const).map(([t, name]) => {
    const r = bodyReach(body, t) * unit;
    return { name, x: r * Math.cos(t), y: -r * Math.sin(t) };
  });
  const [a, b] = ends;
  return (
    <g>
      <line x1={a?.x} y1={a?.y} x2={b?.x} y2={b?.y} stroke="#fff" strokeWidth="3" opacity=".5" />
      <line x1={a?.x} y1={a?.y} x2={b?.x} y2={b?.y} stroke="#14201f" strokeWidth="1.3" strokeDasharray="6 4" />
      {ends.map(({ name, x, y }) => (
        <g key={name}>
          <circle cx={x * 0.93} cy={y * 0.93} r="7" fill="var(--sheet)" stroke="var(--ink)" strokeWidth=".8" />
          <text x={x * 0.93} y={y * 0.93 + 3.2} textAnchor="middle" fontSize="9" fontWeight="600" fill="var(--ink)">{name}</text>
        </g>
      ))}
    </g>
  );
}

/** White under ink, so that it holds on any colour. */
export function TargetMark({ at: [x, y] }: { at: readonly [number, number] }) {
  const arms = (out: number): string => `M${x - out} ${y}H${x - 7}M${x + 7} ${y}H${x + out}M${x} ${y - out}V${y - 7}M${x} ${y + 7}V${y + out}`;
  return (
    <g fill="none">
      <g stroke="#fff" strokeWidth="4.4"><circle cx={x} cy={y} r="7" /><path d={arms(15)} /></g>
      <g stroke="#14201f" strokeWidth="1.8"><circle cx={x} cy={y} r="7" /><path d={arms(14)} /></g>
    </g>
  );
}

/** The linked mark with its lines across the body, whose outline is given as a path. */
export function LinkedCross({ at: [x, y], outline }: { at: readonly [number, number]; outline: string }) {
  const clip = useId();
  const lines = `M-100 ${y}H${x - 6}M${x + 6} ${y}H100M${x} -100V${y - 6}M${x} ${y + 6}V100`;
  return (
    <g fill="none">
      <clipPath id={clip}><path d={outline} /></clipPath>
      <g clipPath={`url(#${clip})`}>
        <path d={lines} stroke="#fff" strokeWidth="2.2" opacity=".55" />
        <path d={lines} stroke="#14201f" strokeWidth=".8" />
      </g>
      <circle cx={x} cy={y} r="6" stroke="#fff" strokeWidth="2.6" />
      <circle cx={x} cy={y} r="6" stroke="#14201f" strokeWidth="1.3" />
    </g>
  );
}
