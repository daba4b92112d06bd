import { ellipticRadiusSquared, type EllipseGeometry } from './ellipse';
import type { ShapeField } from './truth-field';

/**
 * Smooth bump (1 - s^2)^2 of the elliptic radius s < 1. Its area as a target is the integral of the weight, pi a b / 3, so
 * that area times contrast is the integral of the contrast.
 */
export function bumpField(g: EllipseGeometry): ShapeField {
  const radius2 = ellipticRadiusSquared(g);
  return {
    weightAt(x, y) {
      const rest = 1 - radius2(x, y);
      return rest > 0 ? rest * rest : 0;
    },
    interfaces: [],
    piecewiseConstant: false,
    x: g.x,
    y: g.y,
    area: (Math.PI * g.semiAxisA * g.semiAxisB) / 3,
  };
}
