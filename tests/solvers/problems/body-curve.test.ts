import { describe, expect, it } from 'vitest';
import { bodyCurve, polarAngle, type ImpedanceBody } from '../../../solvers/problems/electrical-impedance/body-curve';

const pebble: ImpedanceBody = { kind: 'star', radius: 0.1, cosine: [0.05, 0.12, -0.04, 0.02, 0, 0.01], sine: [0, 0.03, 0.06, 0, 0, 0, 0, 0.02] };

/** Perimeter and area by the trapezoidal rule, which converges exponentially for periodic functions. */
function trapezoid(body: ImpedanceBody, n: number): { length: number; area: number } {
  const curve = bodyCurve({ body });
  let length = 0;
  let area = 0;
  for (let i = 0; i < n; i++) {
    const { x, y, dx, dy } = curve.point((2 * Math.PI * i) / n);
    length += Math.hypot(dx, dy);
    area += 0.5 * (x * dy - y * dx);
  }
  return { length: (length * 2 * Math.PI) / n, area: (area * 2 * Math.PI) / n };
}

describe('the boundary of a star-shaped body', () => {
  it('has the position that its Fourier coefficients give, and the derivatives of that position', () => {
    const curve = bodyCurve({ body: pebble });
    const h = 1e-4;
    for (const t of [0, 0.7, 2.1, 3.9, 6.2]) {
      const r = pebble.radius * (1 + pebble.cosine.reduce((sum, c, k) => sum + c * Math.cos((k + 1) * t), 0) + pebble.sine.reduce((sum, c, k) => sum + c * Math.sin((k + 1) * t), 0));
      const p = curve.point(t);
      expect(p.x).toBeCloseTo(r * Math.cos(t), 15);
      expect(p.y).toBeCloseTo(r * Math.sin(t), 15);
      expect(curve.radiusAt(t)).toBeCloseTo(r, 15);
      const before = curve.point(t - h);
      const after = curve.point(t + h);
      // Central differences: h^2 / 6 times third derivatives up to about 10, 1e-8; rounding 1e-17 / h^2 in the second ones.
      expect(p.dx).toBeCloseTo((after.x - before.x) / (2 * h), 7);
      expect(p.dy).toBeCloseTo((after.y - before.y) / (2 * h), 7);
      expect(p.ddx).toBeCloseTo((after.x - 2 * p.x + before.x) / (h * h), 5);
      expect(p.ddy).toBeCloseTo((after.y - 2 * p.y + before.y) / (h * h), 5);
    }
  });

  it('measures arc length from angle 0, over turns, and finds the angle again', () => {
    const curve = bodyCurve({ body: pebble });
    expect(curve.length / trapezoid(pebble, 4000).length - 1).toBeCloseTo(0, 13);
    expect(curve.arcLength(0)).toBe(0);
    expect(curve.arcLength(2 * Math.PI)).toBeCloseTo(curve.length, 15);
    expect(curve.arcLength(1 - 2 * Math.PI)).toBeCloseTo(curve.arcLength(1) - curve.length, 15);
    for (const t of [-3, -0.01, 0, 0.3, 1, 4, 6.28, 9]) expect(curve.parameterAt(curve.arcLength(t))).toBeCloseTo(t, 13);
  });

  it('is the circle for a disc and for a star without coefficients', () => {
    for (const body of [{ kind: 'disc', radius: 0.2 }, { kind: 'star', radius: 0.2, cosine: [0, 0], sine: [] }] as const) {
      const curve = bodyCurve({ body: body as ImpedanceBody });
      expect(curve.disc).toBe(true);
      expect(curve.length).toBe(2 * Math.PI * 0.2);
      expect(curve.point(0)).toEqual({ x: 0.2, y: 0, dx: -0, dy: 0.2, ddx: -0.2, ddy: -0 });
      expect(curve.parameterAt(curve.arcLength(5))).toBeCloseTo(5, 15);
    }
  });

  it('tells inside from outside, with the distance near the boundary', () => {
    const curve = bodyCurve({ body: pebble });
    for (const t of [0.2, 1.5, 3, 5]) {
      const { x, y, dx, dy } = curve.point(t);
      const speed = Math.hypot(dx, dy);
      const shift = 1e-6;
      const [ix, iy] = [x - (shift * dy) / speed, y + (shift * dx) / speed];
      expect(curve.inside(ix, iy)).toBe(true);
      expect(curve.inside(2 * x - ix, 2 * y - iy)).toBe(false);
      expect(curve.depth(ix, iy) / shift).toBeCloseTo(1, 3);
      expect(curve.depth(2 * x - ix, 2 * y - iy) / shift).toBeCloseTo(-1, 3);
      expect(polarAngle(x, y)).toBeCloseTo(t, 12);
    }
    expect(curve.inside(0, 0)).toBe(true);
  });
});
