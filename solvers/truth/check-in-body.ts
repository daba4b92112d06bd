import type { TruthDefinition } from '../../shared/domain/truth-definition';
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
