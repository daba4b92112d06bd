import type { KeyboardEvent, PointerEvent } from 'react';
import type { Body } from '../../../shared/domain/body';
import { plainNumber } from '../../lib/problem-words';
import { useWidth } from '../../lib/use-size';
import { linearTicks, tickText } from '../charts/scales';
import { linePath } from '../charts/plot';
import type { BodyImageProps } from './body-image';
import { TargetMark } from './image-marks';
import { valueAt, type Picture } from './pixels';

interface LineImageProps extends BodyImageProps {
  body: Extract<Body, { kind: 'interval' }>;
  /** Part of the line that is shown. */
  window?: readonly [number, number];
}

const curvePoints = ({ grid, values }: Picture): (readonly [number, number] | null)[] =>
  Array.from(values, (v, i) => (Number.isNaN(v) ? null : ([grid.xMin + ((i + 0.5) * (grid.xMax - grid.xMin)) / grid.nx, v] as const)));

/** A function of one variable as a curve, in the place where other families show an image. */
export function LineImage({ label, picture, body, low, high, map = 'sequential', mark, cross, onCross, crossStep, under, size, window: part }: LineImageProps) {
  const [ref, width] = useWidth(240);
  const [from, to] = part ?? [body.from, body.to];
  const room = width >= 150;
  const height = Math.round(width * (room ? 0.76 : 0.8));
  const left = room ? 34 : 2;
  const right = width - (room ? 6 : 2);
  const top = room ? 6 : 2;
  const bottom = height - (room ? 20 : 2);
  const X = (x: number): number => left + ((x - from) / (to - from || 1)) * (right - left);
  const Y = (y: number): number => bottom - ((y - low) / (high - low || 1)) * (bottom - top);
  const path = (p: Picture): string => linePath(curvePoints(p).map((q) => (q && q[0] >= from && q[0] <= to ? [X(q[0]), Math.min(bottom + 40, Math.max(top - 40, Y(q[1])))] : null)));
  const move = (x: number) => onCross?.({ x: Math.min(to, Math.max(from, x)), y: 0.5 });
  const follow = (e: PointerEvent<HTMLElement>) => move(from + ((e.clientX - e.currentTarget.getBoundingClientRect().left - left) / (right - left)) * (to - from));
  const onKeyDown = (e: KeyboardEvent) => {
    const step = { ArrowLeft: -1, ArrowRight: 1 }[e.key];
    if (!step || !cross) return;
    e.preventDefault();
    move(cross.x + step * (crossStep ?? (to - from) / 100));
  };
  const interactive = onCross
    ? { tabIndex: 0, onKeyDown, onPointerDown: follow, onPointerMove: (e: PointerEvent<HTMLElement>) => { if (e.pointerType === 'mouse' || e.buttons) follow(e); } }
    : {};
  const colour = map === 'diverging' ? 'var(--brick-mark)' : 'var(--petrol)';
  const place = (p: { x: number; y: number }): [number, number] | null => {
    const value = picture ? valueAt(picture, p.x, 0.5) : null;
    return value === null ? null : [X(p.x), Math.min(bottom, Math.max(top, Y(value)))];
  };
  const markAt = mark ? place(mark) : null;
  const crossAt = cross ? place(cross) : null;
  return (
    <div className="line-image" role="img" aria-label={onCross ? `${label}. Arrow keys move the linked mark.` : label} style={{ width: size, cursor: onCross ? 'crosshair' : undefined, touchAction: onCross ? 'pan-y' : undefined }} {...interactive}>
      <div ref={ref} style={{ position: 'relative', height }}>
        <svg width={width} height={height} aria-hidden="true">
          {room ? linearTicks(low, high, 4).map((v) => (
            <g key={v}><line x1={left} x2={right} y1={Y(v)} y2={Y(v)} stroke="var(--hair)" /><text className="ax" x={left - 5} y={Y(v) + 4} textAnchor="end">{tickText(v)}</text></g>
          )) : null}
          {low < 0 && high > 0 ? <line x1={left} x2={right} y1={Y(0)} y2={Y(0)} stroke="var(--hair-2)" /> : null}
          {room ? [from, (from + to) / 2, to].map((v, i) => <text key={i} className="ax" x={X(v)} y={bottom + 14} textAnchor={i === 0 ? 'start' : i === 2 ? 'end' : 'middle'}>{plainNumber(v)}</text>) : null}
          <clipPath id={`lc${Math.round(left)}-${width}-${height}`}><rect x={left} y={top} width={Math.max(0, right - left)} height={Math.max(0, bottom - top)} /></clipPath>
          <rect x={left} y={top} width={Math.max(0, right - left)} height={Math.max(0, bottom - top)} fill="none" stroke={picture ? 'var(--hair-2)' : 'var(--line)'} strokeDasharray={picture ? undefined : '3 3'} />
          <g clipPath={`url(#lc${Math.round(left)}-${width}-${height})`} fill="none">
            {under ? <path d={path(under)} stroke="var(--ink-2)" strokeWidth={room ? 1.4 : 1} strokeDasharray="5 3" /> : null}
            {picture ? <path d={path(picture)} stroke={colour} strokeWidth={room ? 2 : 1.4} /> : null}
            {cross ? <line x1={X(cross.x)} x2={X(cross.x)} y1={top} y2={bottom} stroke="var(--ink)" strokeWidth=".9" /> : null}
          </g>
          {crossAt ? <circle cx={crossAt[0]} cy={crossAt[1]} r="4" fill="var(--sheet)" stroke="var(--ink)" strokeWidth="1.4" /> : null}
          {markAt ? <TargetMark at={markAt} /> : null}
        </svg>
      </div>
    </div>
  );
}
