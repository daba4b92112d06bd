import { useEffect, useId, useRef, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react';
import { useTheme } from '../../lib/theme';
import { colourMap, type MapName } from './colour-maps';
import type { Picture } from './pixels';

export interface ElectrodeLayout {
  readonly count: number;
  /** Share of the boundary under all electrodes. */
  readonly coverage: number;
  /** Angle of electrode 1, degrees counter-clockwise from x. */
  readonly firstDeg: number;
  readonly clockwise: boolean;
}

/** A place in the body, m. */
export interface Place {
  readonly x: number;
  readonly y: number;
}

export interface DiscImageProps {
  /** Spoken name of the picture. */
  label: string;
  /** Null shows the outline, for loading or sealed content. */
  picture: Picture | null;
  map?: MapName;
  low: number;
  high: number;
  electrodes?: ElectrodeLayout | null;
  /** Print the electrode numbers. */
  numbered?: boolean;
  /** Electrodes to show as driven: drawn in petrol. */
  driven?: readonly number[];
  /** Target mark at the largest error. */
  mark?: Place | null;
  /** Cut from A to B through the centre, at this angle (radians). */
  cutAngle?: number | null;
  /** The linked cross; with `onCross` it follows pointer, touch and arrow keys. */
  cross?: Place | null;
  onCross?: (place: Place) => void;
  /** Step of the arrow keys, m. */
  crossStep?: number;
  size?: number | string;
  /** More SVG in a box of -R to R with R = 100 at the body radius, y down. */
  children?: ReactNode;
}

const R = 100;

/** An image on a disc: canvas for the values, SVG over it for outline, electrodes, marks and cut. */
export function DiscImage(props: DiscImageProps) {
  const { label, picture, map = 'sequential', low, high, electrodes, numbered = false, driven = [], mark, cutAngle, cross, onCross, crossStep, size, children } = props;
  const canvas = useRef<HTMLCanvasElement>(null);
  const dark = useTheme() === 'dark';
  useEffect(() => {
    if (canvas.current && picture) paint(canvas.current, picture, map, low, high, dark);
  }, [picture, map, low, high, dark]);

  const radius = picture?.grid.bodyRadius ?? 1;
  const view = numbered ? 120 : electrodes ? 110 : 103;
  const scale = (R / view) * 100;
  const toUnit = (p: Place): [number, number] => [(p.x / radius) * R, (-p.y / radius) * R];
  const move = (x: number, y: number) => {
    const r = Math.hypot(x, y);
    const limit = 0.98 * radius;
    onCross?.(r > limit ? { x: (x * limit) / r, y: (y * limit) / r } : { x, y });
  };
  const follow = (e: PointerEvent<HTMLElement>) => {
    const box = e.currentTarget.getBoundingClientRect();
    if (!box.width) return;
    move(
      ((((e.clientX - box.left) / box.width) * 2 - 1) * view * radius) / R,
      (-(((e.clientY - box.top) / box.height) * 2 - 1) * view * radius) / R,
    );
  };
  const onKeyDown = (e: KeyboardEvent) => {
    const step = crossStep ?? radius * 0.02;
    const by = { ArrowLeft: [-step, 0], ArrowRight: [step, 0], ArrowUp: [0, step], ArrowDown: [0, -step] }[e.key];
    if (!by || !cross) return;
    e.preventDefault();
    move(cross.x + (by[0] ?? 0), cross.y + (by[1] ?? 0));
  };
  const interactive = onCross
    ? {
        tabIndex: 0,
        style: { cursor: 'crosshair', touchAction: 'none' as const, width: size },
        onKeyDown,
        onPointerMove: (e: PointerEvent<HTMLElement>) => {
          if (e.pointerType === 'mouse' || e.buttons) follow(e);
        },
        onPointerDown: follow,
      }
    : { style: { width: size } };
  return (
    <div className="disc" role="img" aria-label={onCross ? `${label}. Arrow keys move the linked mark.` : label} {...interactive}>
      <canvas ref={canvas} aria-hidden="true" style={{ width: `${scale}%`, height: `${scale}%`, left: `${(100 - scale) / 2}%`, top: `${(100 - scale) / 2}%` }} />
      <svg viewBox={`${-view} ${-view} ${2 * view} ${2 * view}`} aria-hidden="true">
        <circle r={R} fill="none" stroke={picture ? 'var(--ink)' : 'var(--line)'} strokeWidth="1" strokeDasharray={picture ? undefined : '3 3'} vectorEffect="non-scaling-stroke" />
        {electrodes ? <Electrodes layout={electrodes} numbered={numbered} driven={driven} /> : null}
        {cutAngle === null || cutAngle === undefined ? null : <Cut angle={cutAngle} />}
        {children}
        {mark ? <TargetMark at={toUnit(mark)} /> : null}
        {cross ? <LinkedCross at={toUnit(cross)} /> : null}
      </svg>
    </div>
  );
}

function paint(canvas: HTMLCanvasElement, picture: Picture, map: MapName, low: number, high: number, dark: boolean): void {
  const { nx, ny } = picture.grid;
  canvas.width = nx;
  canvas.height = ny;
  const context = canvas.getContext('2d');
  if (!context) return;
  const colours = colourMap(map, dark);
  const image = context.createImageData(nx, ny);
  const values = grownOverRim(picture);
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const v = values[j * nx + i] ?? NaN;
      if (Number.isNaN(v)) continue;
      const t = Math.round(((v - low) / (high - low)) * 255);
      const colour = colours[t < 0 ? 0 : t > 255 ? 255 : t] ?? [0, 0, 0];
      // The canvas counts rows from the top, pictures from the lowest y.
      const at = 4 * ((ny - 1 - j) * nx + i);
      image.data[at] = colour[0];
      image.data[at + 1] = colour[1];
      image.data[at + 2] = colour[2];
      image.data[at + 3] = 255;
    }
  }
  context.putImageData(image, 0, 0);
}

/**
 * For drawing only: pixels just outside the body take a neighbour's value, so that the round clip and not the pixel staircase
 * ends the picture.
 */
function grownOverRim({ grid: { nx, ny }, values }: Picture): Float64Array {
  let grown = values;
  for (let pass = 0; pass < 2; pass++) {
    const before = grown;
    grown = before.slice();
    for (let p = 0; p < grown.length; p++) {
      if (!Number.isNaN(before[p])) continue;
      const i = p % nx;
      const around = [i > 0 ? before[p - 1] : NaN, i < nx - 1 ? before[p + 1] : NaN, p >= nx ? before[p - nx] : NaN, p < nx * (ny - 1) ? before[p + nx] : NaN];
      grown[p] = around.find((v) => v !== undefined && !Number.isNaN(v)) ?? NaN;
    }
  }
  return grown;
}

/** Angle of electrode `index` (from 0), radians counter-clockwise. */
export function electrodeAngle(layout: ElectrodeLayout, index: number): number {
  const turn = (2 * Math.PI * index) / layout.count;
  return (layout.firstDeg * Math.PI) / 180 + (layout.clockwise ? -turn : turn);
}

function Electrodes({ layout, numbered, driven }: { layout: ElectrodeLayout; numbered: boolean; driven: readonly number[] }) {
  const half = (Math.PI * layout.coverage) / layout.count;
  const at = (t: number, r: number): string => `${(r * Math.cos(t)).toFixed(2)} ${(-r * Math.sin(t)).toFixed(2)}`;
  return (
    <g>
      {Array.from({ length: layout.count }, (_, i) => {
        const a = electrodeAngle(layout, i);
        const on = driven.includes(i);
        return (
          <g key={i}>
            <path d={`M${at(a - half, R + 4)}A${R + 4} ${R + 4} 0 0 0 ${at(a + half, R + 4)}`} fill="none" stroke={on ? 'var(--petrol)' : 'var(--ink)'} strokeWidth={on ? 6 : 4} />
            {numbered ? <text x={113 * Math.cos(a)} y={-113 * Math.sin(a) + 2.6} textAnchor="middle" fontSize="7.4" fill="var(--ink-2)">{i + 1}</text> : null}
          </g>
        );
      })}
    </g>
  );
}

function Cut({ angle }: { angle: number }) {
  const x = Math.cos(angle) * R;
  const y = -Math.sin(angle) * R;
  return (
    <g>
      <line x1={-x} y1={-y} x2={x} y2={y} stroke="#fff" strokeWidth="3" opacity=".5" />
      <line x1={-x} y1={-y} x2={x} y2={y} stroke="#14201f" strokeWidth="1.3" strokeDasharray="6 4" />
      {([[-1, 'A'], [1, 'B']] as const).map(([side, name]) => (
        <g key={name}>
          <circle cx={side * x * 0.93} cy={side * y * 0.93} r="7" fill="var(--sheet)" stroke="var(--ink)" strokeWidth=".8" />
          <text x={side * x * 0.93} y={side * y * 0.93 + 3.2} textAnchor="middle" fontSize="9" fontWeight="600" fill="var(--ink)">{name}</text>
        </g>
      ))}
    </g>
  );
}

/** White under ink, so that it holds on any colour. */
function TargetMark({ at: [x, y] }: { at: [number, number] }) {
  const arms = (out: number): string => `M${x - out} ${y}H${x - 7}M${x + 7} ${y}H${x + out}M${x} ${y - out}V${y - 7}M${x} ${y + 7}V${y + out}`;
  return (
    <g fill="none">
      <g stroke="#fff" strokeWidth="4.4"><circle cx={x} cy={y} r="7" /><path d={arms(15)} /></g>
      <g stroke="#14201f" strokeWidth="1.8"><circle cx={x} cy={y} r="7" /><path d={arms(14)} /></g>
    </g>
  );
}

function LinkedCross({ at: [x, y] }: { at: [number, number] }) {
  const clip = useId();
  const lines = `M-100 ${y}H${x - 6}M${x + 6} ${y}H100M${x} -100V${y - 6}M${x} ${y + 6}V100`;
  return (
    <g fill="none">
      <clipPath id={clip}><circle r={R} /></clipPath>
      <g clipPath={`url(#${clip})`}>
        <path d={lines} stroke="#fff" strokeWidth="2.2" opacity=".55" />
        <path d={lines} stroke="#14201f" strokeWidth=".8" />
      </g>
      <circle cx={x} cy={y} r="6" stroke="#fff" strokeWidth="2.6" />
      <circle cx={x} cy={y} r="6" stroke="#14201f" strokeWidth="1.3" />
    </g>
  );
}
