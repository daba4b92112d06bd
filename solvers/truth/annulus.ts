import { ellipseInterface } from './ellipse';
import type { ShapeField } from './truth-field';

/** Constant value between two concentric circles. @throws RangeError when the inner radius is not the smaller */
export function annulusField(g: { x: number; y: number; innerRadius: number; outerRadius: number }): ShapeField {
  if (!(g.innerRadius < g.outerRadius)) throw new RangeError(`innerRadius must be smaller than outerRadius = ${g.outerRadius} m, not ${g.innerRadius} m.`);
  const circle = (radius: number) => ellipseInterface({ x: g.x, y: g.y, semiAxisA: radius, semiAxisB: radius, angleDeg: 0 });
  const inner2 = g.innerRadius * g.innerRadius;
  const outer2 = g.outerRadius * g.outerRadius;
  return {
    weightAt(x, y) {
      const r2 = (x - g.x) * (x - g.x) + (y - g.y) * (y - g.y);
      return r2 < outer2 && r2 >= inner2 ? 1 : 0;
    },
    interfaces: [circle(g.outerRadius), circle(g.innerRadius)],
    piecewiseConstant: true,
    x: g.x,
    y: g.y,
    area: Math.PI * (outer2 - inner2),
  };
}
