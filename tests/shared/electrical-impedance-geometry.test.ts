import { describe, expect, it } from 'vitest';
import { eitGeometrySchema } from '../../shared/domain/geometry/electrical-impedance';
import { starOutline } from '../../shared/domain/star-outline';

const base = {
  body: { kind: 'disc', radius: 0.1 }, electrodes: 16, electrodeCoverage: 0.5, firstElectrodeDeg: 90, numbering: 'clockwise',
  contactImpedance: 0.001, pattern: 'adjacent', current: 0.01, measurement: 'adjacent-undriven',
};
const even = (count: number, sign: 1 | -1) => Array.from({ length: count }, (_, l) => 10 + (sign * 360 * l) / count);

/** Paths and messages of what is refused. */
function faults(over: Record<string, unknown>): { path: string; message: string }[] {
  const result = eitGeometrySchema.safeParse({ ...base, ...over });
  return result.success ? [] : result.error.issues.map(({ path, message }) => ({ path: path.join('.'), message }));
}

describe('geometry of electrical impedance', () => {
  it('leaves a definition of the first kind as it was, without a field more', () => {
    expect(eitGeometrySchema.parse(base)).toEqual(base);
    expect(Object.keys(eitGeometrySchema.parse(base)).sort()).toEqual(Object.keys(base).sort());
  });

  it.each([
    { body: { kind: 'star', radius: 0.1, cosine: [0.1, 0.2], sine: [0, -0.05] } },
    { electrodes: 8 },
    { electrodes: 10 },
    { electrodes: 64 },
    { electrodeAnglesDeg: even(16, -1) },
    { electrodeAnglesDeg: even(16, 1), numbering: 'counter-clockwise' },
    { contactImpedance: Array.from({ length: 16 }, (_, l) => 1e-4 * (l + 1)) },
    { pattern: 'skip', skip: 6 },
    { pattern: 'opposite' },
    { pattern: 'listed', currents: [[1, -1, ...Array<number>(14).fill(0)]] },
    { pattern: 'listed', currents: [[0.1, 0.2, -0.3, ...Array<number>(13).fill(0)]] },
  ])('takes %j', (over) => {
    expect(faults(over)).toEqual([]);
  });

  it.each([
    [{ electrodes: 7 }, 'electrodes', 'At least 8'],
    [{ electrodes: 9 }, 'electrodes', 'even number'],
    [{ electrodes: 66 }, 'electrodes', 'At most 64'],
    [{ body: { kind: 'star', radius: 0.1, cosine: [-0.5, -0.4], sine: [] } }, 'body.cosine', 'at least 0.3 of the radius'],
    [{ body: { kind: 'star', radius: 0.1, cosine: [], sine: [0, 0, 0, 0, 0, 0, 0, 0.5] } }, 'body.cosine', 'bends too sharply'],
    [{ body: { kind: 'star', radius: 0.1, cosine: [0.7], sine: [] } }, 'body.cosine.0', 'Too big'],
    [{ electrodeAnglesDeg: even(15, -1) }, 'electrodeAnglesDeg', 'List 16 angles'],
    [{ electrodeAnglesDeg: even(16, -1).map((a, l) => (l === 3 ? a - 12 : a)) }, 'electrodeAnglesDeg.4', 'Electrodes 4 and 5 overlap'],
    [{ electrodeAnglesDeg: even(16, 1) }, 'electrodeAnglesDeg', 'once round the body, clockwise'],
    [{ contactImpedance: [0.001, 0.002] }, 'contactImpedance', 'one contact impedance or 16'],
    [{ contactImpedance: [...Array<number>(15).fill(0.001), 100] }, 'contactImpedance.15', 'At most 10'],
    [{ contactImpedance: 0 }, 'contactImpedance', 'At least 1e-7'],
    [{ pattern: 'skip' }, 'skip', 'State how many'],
    [{ pattern: 'skip', skip: 7 }, 'skip', 'At most 6 of 16'],
    [{ skip: 2 }, 'skip', 'Only the skip pattern'],
    [{ pattern: 'listed' }, 'currents', 'List the currents'],
    [{ currents: [[1, -1, ...Array<number>(14).fill(0)]] }, 'currents', 'Only the listed pattern'],
    [{ pattern: 'listed', currents: [[1, -1]] }, 'currents.0', 'has 2 values'],
    [{ pattern: 'listed', currents: [[1, -1, ...Array<number>(14).fill(0)], [1, -0.5, ...Array<number>(14).fill(0)]] }, 'currents.1', 'must sum to zero, not 0.5'],
    [{ pattern: 'listed', currents: [Array<number>(16).fill(0)] }, 'currents.0', 'drives no current'],
    [{ pattern: 'listed', currents: [Array.from({ length: 16 }, (_, l) => (l % 2 === 0 ? 1 : -1))] }, 'measurement', 'no adjacent pair of electrodes undriven'],
    [{ pattern: 'trigonometric' }, 'measurement', 'drive every electrode'],
  ] as const)('refuses %j at its field', (over, path, words) => {
    const found = faults(over);
    expect(found.map((fault) => fault.path)).toContain(path);
    expect(found.find((fault) => fault.path === path)?.message).toContain(words);
  });

  it('measures gaps between electrodes along the outline, not by angles', () => {
    // A long body: the same angles are far apart at the tips and close at the waist.
    const body = { kind: 'star', radius: 0.1, cosine: [0, 0.4], sine: [] };
    expect(faults({ body })).toEqual([]);
    const found = faults({ body, electrodeAnglesDeg: even(16, -1), electrodeCoverage: 0.9 });
    expect(found[0].message).toContain('overlap or nearly touch');
  });

  it('has the figures of a known outline: the circle', () => {
    const circle = starOutline([], []);
    expect(circle.length).toBeCloseTo(2 * Math.PI, 12);
    expect(circle.arcLength(-Math.PI / 2)).toBeCloseTo(1.5 * Math.PI, 12);
    expect([circle.smallest, circle.largest, circle.sharpest]).toEqual([1, 1, 1]);
  });
});
