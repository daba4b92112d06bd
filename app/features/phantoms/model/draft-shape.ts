import { decimalText, parseDecimal, shiftDecimal } from '../../../lib/decimal';
import type { Body } from '../../../../shared/domain/body';
import type { Shape } from '../../../../shared/domain/truth-definition';
import { bodyReach } from '../../../components/images/body-outline';

export type RoundOrRectangle = Exclude<Body, { kind: 'interval' }>;

export type ShapeKind = Shape['kind'];
export const shapeNames: Record<ShapeKind, string> = { ellipse: 'Ellipse', polygon: 'Polygon', annulus: 'Annulus', bump: 'Smooth bump' };

/**
 * A shape as the editor holds it: what was typed, lengths in mm, angles in degrees, value in the unit of the family. `a` and `b` are the
 * half-axes, or the inner and outer radius of an annulus. A polygon's vertices are relative to its anchor (x, y), before
 * the turn by `angle`.
 */
export interface DraftShape {
  readonly id: string;
  readonly kind: ShapeKind;
  readonly label: string;
  readonly target: boolean;
  readonly x: string;
  readonly y: string;
  readonly a: string;
  readonly b: string;
  readonly angle: string;
  readonly value: string;
  readonly vertices: readonly (readonly [string, string])[];
}
export type NumberKey = 'x' | 'y' | 'a' | 'b' | 'angle' | 'value';

/** The numbers of a shape in mm, degrees and the unit of the value; NaN where the text is no number. */
export interface ShapeNumbers {
  readonly x: number;
  readonly y: number;
  readonly a: number;
  readonly b: number;
  readonly angle: number;
  readonly value: number;
  readonly vertices: readonly (readonly [number, number])[];
}

export function shapeNumbers(shape: DraftShape): ShapeNumbers {
  const n = parseDecimal;
  return {
    x: n(shape.x), y: n(shape.y), a: n(shape.a), b: n(shape.b), angle: n(shape.angle), value: n(shape.value),
    vertices: shape.vertices.map(([u, v]) => [n(u), n(v)] as const),
  };
}

/** Number inputs of a kind, in the order of the table. */
export function numberKeys(kind: ShapeKind): readonly NumberKey[] {
  if (kind === 'polygon') return ['x', 'y', 'angle', 'value'];
  if (kind === 'annulus') return ['x', 'y', 'a', 'b', 'value'];
  return ['x', 'y', 'a', 'b', 'angle', 'value'];
}

/** Name of a field with its unit; `valueUnit` is the family's, '' for a pure number. */
export function fieldLabel(kind: ShapeKind, key: NumberKey, valueUnit: string): string {
  const annulus = kind === 'annulus';
  const names: Record<NumberKey, string> = {
    x: 'Centre x, mm', y: 'Centre y, mm', a: annulus ? 'Inner radius, mm' : 'Half-axis 1, mm', b: annulus ? 'Outer radius, mm' : 'Half-axis 2, mm',
    angle: 'Angle, \u00b0', value: valueUnit ? `Value, ${valueUnit}` : 'Value',
  };
  return names[key];
}

/** Step of the plus and minus buttons and of the arrow keys in a field. */
export const fieldStep: Record<NumberKey, number> = { x: 1, y: 1, a: 1, b: 1, angle: 5, value: 0.05 };

let counter = 0;
export function newShapeId(): string {
  counter += 1;
  return `shape-${Date.now().toString(36)}-${counter}`;
}

/** A new shape near the centre, sized for the body, named apart from the shapes there are. */
export function newShape(kind: ShapeKind, bodyRadiusMm: number, background: number, existing: readonly DraftShape[]): DraftShape {
  const r = Number.isFinite(bodyRadiusMm) && bodyRadiusMm > 0 ? bodyRadiusMm : 100;
  const mm = (share: number): string => decimalText(Math.max(1, Math.round(share * r)));
  // Apart from the background and, where there is one, in the order of size of the values there are.
  const largest = Math.max(0, ...existing.map((shape) => Math.abs(parseDecimal(shape.value))).filter(Number.isFinite));
  const value = Number.isFinite(background) && background > 0 ? background * 1.6 : largest || 1;
  const base = shapeNames[kind];
  const taken = new Set(existing.map((s) => s.label));
  let label = base;
  for (let i = 2; taken.has(label); i++) label = `${base} ${i}`;
  return {
    id: newShapeId(), kind, label, target: true, x: '0', y: decimalText(-Math.round(0.05 * r)),
    a: mm(kind === 'annulus' ? 0.12 : 0.16), b: mm(kind === 'annulus' ? 0.22 : 0.16), angle: '0', value: decimalText(Number(value.toPrecision(3))),
    vertices: kind === 'polygon'
      ? ([[-0.2, -0.15], [0.2, -0.15], [0.2, 0.15], [-0.2, 0.15]] as const).map(([u, v]) => [decimalText(Math.round(u * r)), decimalText(Math.round(v * r))] as const)
      : [],
  };
}

const toMm = (metres: number): string => decimalText(shiftDecimal(metres, 3));
const toMetres = (mm: number): number => shiftDecimal(Number(mm.toPrecision(12)), -3);

export function fromShape(shape: Shape): DraftShape {
  const common = { id: newShapeId(), kind: shape.kind, label: shape.label, target: shape.target, value: decimalText(shape.value), a: '', b: '', angle: '0', vertices: [] };
  if (shape.kind === 'polygon') {
    const n = shape.vertices.length;
    const cx = Math.round((shape.vertices.reduce((sum, v) => sum + v[0], 0) / n) * 1000);
    const cy = Math.round((shape.vertices.reduce((sum, v) => sum + v[1], 0) / n) * 1000);
    return {
      ...common, x: decimalText(cx), y: decimalText(cy),
      vertices: shape.vertices.map(([x, y]) => [decimalText(shiftDecimal(x, 3) - cx), decimalText(shiftDecimal(y, 3) - cy)] as const),
    };
  }
  if (shape.kind === 'annulus') return { ...common, x: toMm(shape.x), y: toMm(shape.y), a: toMm(shape.innerRadius), b: toMm(shape.outerRadius) };
  return { ...common, x: toMm(shape.x), y: toMm(shape.y), a: toMm(shape.semiAxisA), b: toMm(shape.semiAxisB), angle: decimalText(shape.angleDeg) };
}

/** Vertices of a polygon in the body's frame, mm. */
export function placedVertices(n: ShapeNumbers): [number, number][] {
  const turn = (Number.isFinite(n.angle) ? n.angle : 0) * (Math.PI / 180);
  const c = turn === 0 ? 1 : Math.cos(turn);
  const s = turn === 0 ? 0 : Math.sin(turn);
  return n.vertices.map(([u, v]) => [n.x + c * u - s * v, n.y + s * u + c * v]);
}

/** The shape for the contract, lengths in m. Fields that are no numbers come out as NaN, which the schema refuses. */
export function toShape(draft: DraftShape): Shape {
  const n = shapeNumbers(draft);
  const common = { label: draft.label, value: n.value, target: draft.target };
  if (draft.kind === 'polygon') {
    const vertices = placedVertices(n).map(([x, y]): [number, number] => [toMetres(x), toMetres(y)]);
    return { kind: 'polygon', ...common, vertices };
  }
  const place = { x: toMetres(n.x), y: toMetres(n.y) };
  if (draft.kind === 'annulus') return { kind: 'annulus', ...common, ...place, innerRadius: toMetres(n.a), outerRadius: toMetres(n.b) };
  return { kind: draft.kind, ...common, ...place, semiAxisA: toMetres(n.a), semiAxisB: toMetres(n.b), angleDeg: n.angle };
}

/** Points of the outline in the body's frame, mm. */
function outlinePoints(draft: DraftShape): [number, number][] {
  const n = shapeNumbers(draft);
  if (draft.kind === 'polygon') return placedVertices(n);
  const annulus = draft.kind === 'annulus';
  const turn = annulus ? 0 : n.angle * (Math.PI / 180);
  return Array.from({ length: 72 }, (_, k): [number, number] => {
    const t = (k / 72) * 2 * Math.PI;
    const u = (annulus ? n.b : n.a) * Math.cos(t);
    const v = n.b * Math.sin(t);
    return [n.x + u * Math.cos(turn) - v * Math.sin(turn), n.y + u * Math.sin(turn) + v * Math.cos(turn)];
  });
}

/** Farthest distance of the shape from the body's centre, mm. */
export function reach(draft: DraftShape): number {
  if (draft.kind === 'annulus') {
    const n = shapeNumbers(draft);
    return Math.hypot(n.x, n.y) + n.b;
  }
  return Math.max(...outlinePoints(draft).map(([x, y]) => Math.hypot(x, y)));
}

/** Smallest gap between the shape and the body's edge, mm: towards the nearest side of a rectangle, along the ray from the centre of a round body. Negative where the shape reaches beyond. */
export function gapToEdge(draft: DraftShape, body: RoundOrRectangle): number {
  if (body.kind === 'disc') return 1000 * body.radius - reach(draft);
  return Math.min(...outlinePoints(draft).map(([x, y]) => (body.kind === 'rectangle' ? Math.min(500 * body.width - Math.abs(x), 500 * body.height - Math.abs(y)) : 1000 * bodyReach(body, Math.atan2(y, x)) - Math.hypot(x, y))));
}

/** Moved by whole steps of mm; text that is no number stays as it is. */
export function moveShape(shape: DraftShape, dx: number, dy: number): DraftShape {
  const n = shapeNumbers(shape);
  return {
    ...shape,
    x: Number.isFinite(n.x) ? decimalText(n.x + dx) : shape.x,
    y: Number.isFinite(n.y) ? decimalText(n.y + dy) : shape.y,
  };
}
