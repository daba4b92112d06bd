import type { Shape, TruthDefinition } from '../../shared/domain/truth-definition';
import type { Target } from '../core/types';
import { annulusField } from './annulus';
import { arrayField } from './array';
import { bumpField } from './bump';
import { ellipseField } from './ellipse';
import { expressionField } from './expression';
import { polygonField } from './polygon';
import { TruthError } from './truth-error';
import { conductivityRange, type ValueRange } from './value-range';

/** A closed curve across which the truth jumps. Lengths in metres. */
export interface TruthInterface {
  readonly closed: true;
  /** True for polygons: straight between corners, which `points` always holds. */
  readonly corners: boolean;
  /** Points in order, counter-clockwise, x, y pairs, neighbours (the last and the first too) at most `maxSpacing` apart. */
  points(maxSpacing: (x: number, y: number) => number): Float64Array;
  /** Nearest point of the exact curve. */
  project(x: number, y: number): [number, number];
  inside(x: number, y: number): boolean;
  /** Where the curve is smooth: position and its first and second derivative (x, y, x', y', x'', y'') at 0 <= t < 1, counter-clockwise, of period 1. */
  readonly curveAt?: (t: number, out: Float64Array) => void;
}

/** A ground truth: the unknown (conductivity in S/m, attenuation in 1/m) over the plane, metres. */
export interface TruthField {
  readonly background: number;
  /** @throws RangeError naming the place where an expression has no admissible value */
  valueAt(x: number, y: number): number;
  readonly interfaces: readonly TruthInterface[];
  /** Constant between interfaces. */
  readonly piecewiseConstant: boolean;
  readonly targets: readonly Target[];
}

/** One shape of a truth: `weightAt` is 1 where its value holds, 0 where it does not, between for a smooth shape. */
export interface ShapeField {
  weightAt(x: number, y: number): number;
  readonly interfaces: readonly TruthInterface[];
  readonly piecewiseConstant: boolean;
  /** Centroid in metres and area in m^2. */
  readonly x: number;
  readonly y: number;
  readonly area: number;
}

function shapeField(shape: Shape): ShapeField {
  switch (shape.kind) {
    case 'ellipse':
      return ellipseField(shape);
    case 'polygon':
      return polygonField(shape.vertices);
    case 'annulus':
      return annulusField(shape);
    case 'bump':
      return bumpField(shape);
  }
}

/**
 * The ground truth of a definition.
 *
 * Shapes lie one on another in their order. Where a smooth bump lies on another shape it blends what lies below with its own
 * value. A target is the shape as declared: what covers it, or lies outside the body, is not taken off its area.
 * @param arrayValues the stored array (rows x cols, row-major) where the truth is an array
 * @param range that the values of an expression or an array are held to
 * @throws TruthError (a RangeError with the path of the field) that names the field and its limit
 */
export function createTruthField(definition: TruthDefinition, arrayValues?: Float64Array, range: ValueRange = conductivityRange): TruthField {
  switch (definition.kind) {
    case 'expression':
      return expressionField(definition.expression, definition.background, range);
    case 'array':
      if (!arrayValues) throw new RangeError(`The values of the array ${definition.sha256} are needed for this ground truth.`);
      return arrayField(definition, arrayValues, range);
    case 'standard':
      throw new RangeError('The published solution belongs to its equation: make it there.');
    case 'shapes': {
      const { background } = definition;
      const adds = 'combine' in definition && definition.combine === 'add';
      const fields = definition.shapes.map((shape, i) => {
        try {
          return shapeField(shape);
        } catch (cause) {
          throw new TruthError(`Shape ${i + 1} (${shape.label}): ${cause instanceof Error ? cause.message : String(cause)}`, ['truth', 'shapes', i], { cause });
        }
      });
      const values = definition.shapes.map((shape) => shape.value);
      return {
        background,
        interfaces: fields.flatMap((field) => field.interfaces),
        piecewiseConstant: fields.every((field) => field.piecewiseConstant),
        targets: definition.shapes.flatMap((shape, i) =>
          shape.target ? [{ label: shape.label, x: fields[i].x, y: fields[i].y, area: fields[i].area, contrast: adds ? shape.value : shape.value - background }] : [],
        ),
        valueAt(x, y) {
          let value = background;
          for (let i = 0; i < fields.length; i++) {
            const weight = fields[i].weightAt(x, y);
            if (adds) value += weight * values[i];
            else if (weight === 1) value = values[i];
            else if (weight > 0) value += weight * (values[i] - value);
          }
          return value;
        },
      };
    }
  }
}
