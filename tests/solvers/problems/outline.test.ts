import { describe, expect, it } from 'vitest';
import { unitGeometry } from '../../support/impedance-case';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { bodyCurve } from '../../../solvers/problems/electrical-impedance/body-curve';
import { bodyOutline, electrodeArcs } from '../../../solvers/problems/electrical-impedance/outline';

const star: EitGeometry['body'] = { kind: 'star', radius: 0.2, cosine: [0.1, 0.15], sine: [0, 0.05, 0.05] };

describe('outlines and electrodes for drawings', () => {
  it('goes round the body in equal steps', () => {
    const points = bodyOutline({ body: star }, 100);
    const curve = bodyCurve({ body: star });
    let length = 0;
    for (let i = 0; i < 100; i++) {
      const j = (i + 1) % 100;
      const step = Math.hypot(points[2 * j] - points[2 * i], points[2 * j + 1] - points[2 * i + 1]);
      // Chords of equal arcs: the curvature takes off up to (step / radius of curvature)^2 / 24.
      expect(step / (curve.length / 100)).toBeCloseTo(1, 2);
      length += step;
    }
    expect(length / curve.length).toBeCloseTo(1, 3);
    expect(() => bodyOutline({ body: star }, 2)).toThrow(RangeError);
  });

  it('puts electrodes of equal width at equal steps, from the first in the direction of the numbering', () => {
    const arcs = electrodeArcs(unitGeometry({ body: star, firstElectrodeDeg: 50, numbering: 'clockwise' }), 33);
    const curve = bodyCurve({ body: star });
    expect((arcs[0].middle * 180) / Math.PI).toBeCloseTo(50, 10);
    const place = (l: number): number => curve.arcLength(arcs[l].middle);
    for (let l = 0; l < 15; l++) expect((place(l) - place(l + 1)) / (curve.length / 16)).toBeCloseTo(1, 10);
    for (const { start, end, centre, normal, points } of arcs) {
      expect((curve.arcLength(end) - curve.arcLength(start)) / (curve.length / 32)).toBeCloseTo(1, 10);
      expect(Math.hypot(...normal)).toBeCloseTo(1, 14);
      expect([points[32], points[33]]).toEqual([expect.closeTo(centre[0], 14), expect.closeTo(centre[1], 14)]);
      // Outwards: a step along the normal leaves the body.
      expect(curve.inside(centre[0] + 1e-4 * normal[0], centre[1] + 1e-4 * normal[1])).toBe(false);
    }
  });

  it('puts electrodes at listed angles', () => {
    const angles = [350, 310, 260, 215, 170, 120, 80, 30];
    for (const body of [star, { kind: 'disc', radius: 0.3 } as const]) {
      const arcs = electrodeArcs(unitGeometry({ body, electrodes: 8, electrodeAnglesDeg: angles, numbering: 'clockwise' }));
      arcs.forEach(({ centre }, l) => {
        const angle = (Math.atan2(centre[1], centre[0]) * 180) / Math.PI;
        expect((((angle - angles[l]) % 360) + 540) % 360).toBeCloseTo(180, 9);
      });
    }
  });
});
