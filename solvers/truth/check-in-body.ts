import type { TruthDefinition } from '../../shared/domain/truth-definition';
import { ellipseInterface } from './ellipse';
import { TruthError } from './truth-error';
import type { TruthField } from './truth-field';

/**
 * Refuses shapes that lie outside a disc, or cover it whole, so that they could not be seen in the data.
 * @param radius of the body, m
 * @throws TruthError naming the shape
 */
export function requireInBody(definition: TruthDefinition, radius: number, fieldOf: (index: number) => TruthField): void {
  if (definition.kind !== 'shapes') return;
  definition.shapes.forEach((shape, i) => {
    const refuse = (what: string): never => {
      throw new TruthError(`Shape ${i + 1} (${shape.label}) ${what} the body of radius ${radius} m.`, ['truth', 'shapes', i]);
    };
    if (shape.kind === 'bump') {
      if (Math.sqrt(shape.x * shape.x + shape.y * shape.y) - Math.max(shape.semiAxisA, shape.semiAxisB) >= radius) refuse('lies outside');
      return;
    }
    const [outline] = fieldOf(i).interfaces;
    const [x, y] = outline.project(0, 0);
    if (Math.sqrt(x * x + y * y) < radius) return;
    if (!outline.inside(0, 0)) refuse('lies outside');
    // The hole of an annulus may hold the whole body or leave some of the ring in it.
    if (shape.kind !== 'annulus') refuse('covers');
    else if (shape.innerRadius - Math.sqrt(shape.x * shape.x + shape.y * shape.y) >= radius) refuse('lies outside');
  });
}

/** Spacing, in radii of the body, of the points of an outline that are looked at. */
const spacing = 0.02;

/**
 * The same for any body.
 * @param contains whether a point (m) lies in the body, which holds the origin
 * @param radius of the body, m
 * @throws TruthError naming the shape
 */
export function requireInOutline(definition: TruthDefinition, contains: (x: number, y: number) => boolean, radius: number, fieldOf: (index: number) => TruthField): void {
  if (definition.kind !== 'shapes') return;
  definition.shapes.forEach((shape, i) => {
    const refuse = (what: string): never => {
      throw new TruthError(`Shape ${i + 1} (${shape.label}) ${what} the body.`, ['truth', 'shapes', i]);
    };
    const outlines = shape.kind === 'bump' ? [ellipseInterface(shape)] : fieldOf(i).interfaces;
    for (const outline of outlines) {
      const points = outline.points(() => spacing * radius);
      for (let k = 0; k < points.length; k += 2) if (contains(points[k], points[k + 1])) return;
    }
    // No outline enters the body: it lies wholly within an odd number of them, and in the shape, or in an even number.
    const within = outlines.filter((outline) => outline.inside(0, 0)).length % 2 === 1;
    if (!within) refuse('lies outside');
    else if (shape.kind !== 'bump') refuse('covers');
  });
}
