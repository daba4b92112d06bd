import { useEffect, useMemo, useRef, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react';
import type { Body } from '../../../shared/domain/body';
import { useTheme } from '../../lib/theme';
import { bodyEdge, bodyHalfSize, bodyReach } from './body-outline';
import { colourMap, type MapName } from './colour-maps';
import type { ElectrodeLayout } from './electrode-layout';
import { Cut, Electrodes, LinkedCross, TargetMark } from './image-marks';
import { LineImage } from './line-image';
import { bodyOf, type Picture } from './pixels';

/** A place in the body, m; on a line x in its own unit and y one half. */
export interface Place {
  readonly x: number;
  readonly y: number;
}

export interface BodyImageProps {
  /** Spoken name of the picture. */
  label: string;
  /** Null shows the outline, for loading or sealed content. */
  picture: Picture | null;
  /** Outline while there is no picture; a disc where it is absent. */
  body?: Body | undefined;
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
  /** On a line: a second curve, dashed, behind the first. */
  under?: Picture | null;
  size?: number | string;
  /** More SVG in a box of -R to R with R = 100 at the body radius, y down. */
  children?: ReactNode;
}

const R = 100;

/** An image on its body: canvas for the values, SVG over it for outline, electrodes, marks and cut. A function of one variable is a curve. */
export function BodyImage(props: BodyImageProps) {
  const body = props.picture ? bodyOf(props.picture.grid) : (props.body ?? { kind: 'disc' as const, radius: 1 });
  return body.kind === 'interval' ? <LineImage {...props} body={body} /> : <PlaneImage {...props} body={body} />;
}

function PlaneImage(props: BodyImageProps & { body: Exclude<Body, { kind: 'interval' }> }) {
  const { label, picture, body, map = 'sequential', low, high, electrodes, numbered = false, driven = [], mark, cutAngle, cross, onCross, crossStep, size, children } = props;
  const canvas = useRef<HTMLCanvasElement>(null);
  const dark = useTheme() === 'dark';
  useEffect(() => {
    if (canvas.current && picture) paint(canvas.current, picture, map, low, high, dark);
  }, [picture, map, low, high, dark]);

  const shape = useMemo(() => outlineOf(body), [body]);
  const { half, unit } = shape;
  const margin = numbered ? 20 : electrodes ? 10 : 3;
  const view = [half[0] * unit + margin, half[1] * unit + margin] as const;
  const share = [(half[0] * unit * 100) / view[0], (half[1] * unit * 100) / view[1]] as const;
  const toUnit = (p: Place): [number, number] => [p.x * unit, -p.y * unit];
  const move = (x: number, y: number) => {
    const r = Math.hypot(x, y);
    const limit = 0.98 * bodyReach(body, Math.atan2(y, x));
    onCross?.(r > limit ? { x: (x * limit) / r, y: (y * limit) / r } : { x, y });
  };
  const follow = (e: PointerEvent<HTMLElement>) => {
    const box = e.currentTarget.getBoundingClientRect();
    if (!box.width || !box.height) return;
    move(((((e.clientX - box.left) / box.width) * 2 - 1) * view[0]) / unit, (-(((e.clientY - box.top) / box.height) * 2 - 1) * view[1]) / unit);
  };
  const onKeyDown = (e: KeyboardEvent) => {
    const step = crossStep ?? Math.max(...half) * 0.02;
    const by = { ArrowLeft: [-step, 0], ArrowRight: [step, 0], ArrowUp: [0, step], ArrowDown: [0, -step] }[e.key];
    if (!by || !cross) return;
    e.preventDefault();
    move(cross.x + (by[0] ?? 0), cross.y + (by[1] ?? 0));
  };
  const box = { width: size, aspectRatio: `${view[0].toFixed(3)} / ${view[1].toFixed(3)}` };
  const interactive = onCross
    ? {
        tabIndex: 0,
        style: { cursor: 'crosshair', touchAction: 'none' as const, ...box },
        onKeyDown,
        onPointerMove: (e: PointerEvent<HTMLElement>) => {
          if (e.pointerType === 'mouse' || e.buttons) follow(e);
        },
        onPointerDown: follow,
      }
    : { style: box };
  return (
    <div className="disc" role="img" aria-label={onCross ? `${label}. Arrow keys move the linked mark.` : label} {...interactive}>
      <canvas ref={canvas} aria-hidden="true" style={{ width: `${share[0]}%`, height: `${share[1]}%`, left: `${(100 - share[0]) / 2}%`, top: `${(100 - share[1]) / 2}%`, ...shape.clip }} />
      <svg viewBox={`${-view[0]} ${-view[1]} ${2 * view[0]} ${2 * view[1]}`} aria-hidden="true">
        <path d={shape.path} fill="none" stroke={picture ? 'var(--ink)' : 'var(--line)'} strokeWidth="1" strokeDasharray={picture ? undefined : '3 3'} vectorEffect="non-scaling-stroke" />
        {electrodes ? <Electrodes layout={electrodes} body={body} unit={unit} numbered={numbered} driven={driven} /> : null}
        {cutAngle === null || cutAngle === undefined ? null : <Cut body={body} unit={unit} angle={cutAngle} />}
        {children}
        {mark ? <TargetMark at={toUnit(mark)} /> : null}
        {cross ? <LinkedCross at={toUnit(cross)} outline={shape.path} /> : null}
      </svg>
    </div>
  );
}

/** Size, outline in drawing units and the canvas's clip. */
function outlineOf(body: Exclude<Body, { kind: 'interval' }>) {
  const half = bodyHalfSize(body);
  const unit = R / Math.max(...half);
  if (body.kind === 'disc') return { half, unit, path: `M${R} 0A${R} ${R} 0 1 0 ${-R} 0A${R} ${R} 0 1 0 ${R} 0Z`, clip: { borderRadius: '50%' } };
  const edge = bodyEdge(body);
  const path = `M${edge.map(([x, y]) => `${(x * unit).toFixed(2)} ${(-y * unit).toFixed(2)}`).join('L')}Z`;
  if (body.kind === 'rectangle') return { half, unit, path, clip: { borderRadius: 0 } };
  const polygon = edge.map(([x, y]) => `${(50 * (1 + x / half[0])).toFixed(2)}% ${(50 * (1 - y / half[1])).toFixed(2)}%`).join(', ');
  return { half, unit, path, clip: { borderRadius: 0, clipPath: `polygon(${polygon})` } };
}

const isRound = ({ grid }: Picture): boolean => bodyOf(grid).kind !== 'rectangle';

function paint(canvas: HTMLCanvasElement, picture: Picture, map: MapName, low: number, high: number, dark: boolean): void {
  const { nx, ny } = picture.grid;
  canvas.width = nx;
  canvas.height = ny;
  const context = canvas.getContext('2d');
  if (!context) return;
  const colours = colourMap(map, dark);
  const image = context.createImageData(nx, ny);
  const values = isRound(picture) ? grownOverRim(picture) : picture.values;
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
