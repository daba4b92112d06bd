import { describe, expect, it } from 'vitest';
import { pairCurrentLines } from '../../../app/features/phantoms/model/current-lines';
import { sphereQuantile } from '../../../app/features/phantoms/model/noise-band';
import { dragShape } from '../../../app/features/phantoms/model/shape-drag';
import { emptyForm } from '../../../app/features/phantoms/model/phantom-form';
import { deriveKey, RandomStream } from '../../../solvers/core/random';

describe('current lines of a pair', () => {
  it('pass through both electrodes, and the inscribed angle is that of the share', () => {
    const first = Math.PI / 2;
    const second = first - Math.PI / 8;
    const p = [Math.cos(first), Math.sin(first)] as const;
    const q = [Math.cos(second), Math.sin(second)] as const;
    for (const [i, arc] of pairCurrentLines(first, second, 1, [0.1, 0.5, 0.9]).entries()) {
      const [cx, cy] = arc.centre;
      // Rounding only: both are constructed from the same chord.
      expect(Math.hypot(p[0] - cx, p[1] - cy)).toBeCloseTo(arc.radius, 12);
      expect(Math.hypot(q[0] - cx, q[1] - cy)).toBeCloseTo(arc.radius, 12);
      // Inscribed angle theorem (Euclid III.20): sine of the angle = half chord over radius.
      const angle = Math.PI / 16 + Math.PI * [0.1, 0.5, 0.9][i]!;
      expect(Math.sin(Math.PI / 16) / arc.radius).toBeCloseTo(Math.abs(Math.sin(angle)), 12);
    }
  });
});

describe('the band of 90 % of the draws', () => {
  it('equals the closed forms on the circle and the sphere', () => {
    // m = 2: a coordinate is the cosine of a uniform angle. m = 3: it is uniform on [-1, 1] (Archimedes).
    expect(sphereQuantile(2, 0.9)).toBeCloseTo(Math.sin(0.45 * Math.PI), 12);
    // 4000 steps of Simpson's rule and linear interpolation: well below 1e-6.
    expect(sphereQuantile(3, 0.9)).toBeCloseTo(0.9, 6);
  });

  it('holds 90 % of drawn values at 208 data', () => {
    const m = 208;
    const half = sphereQuantile(m, 0.9);
    const values = new Float64Array(m);
    let inside = 0;
    const draws = 200;
    for (let d = 0; d < draws; d++) {
      new RandomStream(deriveKey('band', d)).fillNormal(values);
      const norm = Math.hypot(...values);
      for (const v of values) if (Math.abs(v) / norm <= half) inside++;
    }
    // Binomial standard deviation of the share over 41 600 values is 0.0015; four of them.
    expect(Math.abs(inside / (m * draws) - 0.9)).toBeLessThan(0.006);
  });
});

describe('dragging a shape', () => {
  const [lobe] = emptyForm().shapes;
  it('moves by whole mm, sizes along its own axes and turns about its centre', () => {
    const still = { ...lobe!, x: '0', y: '0', angle: '0', a: '40', b: '30' };
    expect(dragShape(still, { part: 'body' }, [0, 0], [12.4, -7.6])).toMatchObject({ x: '12', y: '-8' });
    expect(dragShape(still, { part: 'a' }, [40, 0], [51.2, 9])).toMatchObject({ a: '51', b: '30' });
    expect(dragShape({ ...still, angle: '90' }, { part: 'a' }, [0, 40], [5, 60])).toMatchObject({ a: '60' });
    expect(dragShape(still, { part: 'angle' }, [55, 0], [30, 30])).toMatchObject({ angle: '45' });
  });
  it('keeps an annulus right side out', () => {
    const ring = { ...lobe!, kind: 'annulus' as const, x: '0', y: '0', a: '20', b: '30' };
    expect(dragShape(ring, { part: 'a' }, [20, 0], [45, 0])).toMatchObject({ a: '29', b: '30' });
    expect(dragShape(ring, { part: 'b' }, [0, 30], [0, 5])).toMatchObject({ a: '20', b: '21' });
  });
});
