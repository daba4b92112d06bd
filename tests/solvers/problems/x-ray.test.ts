import { describe, expect, it } from 'vitest';
import { xrayGeometrySchema, type XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { phantomDefinitionSchema, type DefinitionOf } from '../../../shared/domain/phantom-definition';
import { plainTruthSchema } from '../../../shared/domain/truth-definition';
import { dot, norm2 } from '../../../solvers/core/vector';
import { RandomStream, deriveKey } from '../../../solvers/core/random';
import { applySparse } from '../../../solvers/core/sparse';
import { createProblem, dataLayout, describeProblem, problemFacts, problemGrid, problemLine, simulate } from '../../../solvers/problems/registry';
import { layoutSize } from '../../../solvers/problems/problem-family';
import { joseph } from '../../../solvers/problems/x-ray/joseph';
import { projectTruth, rayIntegrals } from '../../../solvers/problems/x-ray/line-integrals';
import { detectorCentre, directionOf, viewAngles, viewRays, type Ray } from '../../../solvers/problems/x-ray/rays';
import { siddon } from '../../../solvers/problems/x-ray/siddon';
import { systemMatrix, xrayCells } from '../../../solvers/problems/x-ray/system-matrix';
import { createTruthField } from '../../../solvers/truth/truth-field';
import { plainRange } from '../../../solvers/truth/value-range';

const parallel = (changes: Partial<XrayGeometry> = {}): XrayGeometry =>
  xrayGeometrySchema.parse({ body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 12, arcDeg: 180, detectors: 20, detectorSpacing: 0.1, cells: 20, ...changes });
const fan = (changes: Partial<XrayGeometry> = {}): XrayGeometry => parallel({ beam: 'fan', arcDeg: 360, sourceDistance: 3, detectorDistance: 1.5, detectorSpacing: 0.18, ...changes });

function integrals(truth: unknown, arrayValues?: Float64Array, geometry = parallel()) {
  const definition = plainTruthSchema.parse(truth);
  return rayIntegrals(createTruthField(definition, arrayValues, plainRange()), definition, geometry);
}
const rayAt = (angleDeg: number, offset: number): Ray => {
  const [nx, ny] = directionOf(angleDeg);
  return { nx, ny, offset };
};
const ellipse = (value: number, x: number, y: number, semiAxisA: number, semiAxisB: number, angleDeg = 0) => ({ kind: 'ellipse', label: 'e', value, x, y, semiAxisA, semiAxisB, angleDeg });
const rays: Ray[] = Array.from({ length: 60 }, (_, k) => rayAt(7.3 * k, -0.85 + (1.7 * k) / 59));

/** Kak and Slaney 1988, equations 3.1 to 3.4: 2 rho A B sqrt(a^2 - s^2) / a^2 with a^2 = A^2 cos^2 + B^2 sin^2 of the angle to the axes. */
function ellipseProjection(rho: number, x: number, y: number, a: number, b: number, angleDeg: number, ray: Ray): number {
  const theta = Math.atan2(ray.ny, ray.nx) - (angleDeg * Math.PI) / 180;
  const square = a * a * Math.cos(theta) ** 2 + b * b * Math.sin(theta) ** 2;
  const s = ray.offset - x * ray.nx - y * ray.ny;
  return square > s * s ? (2 * rho * a * b * Math.sqrt(square - s * s)) / square : 0;
}

describe('Line integrals of ground truths', () => {
  it('of ellipses follow the closed form (Kak and Slaney 1988)', () => {
    const { integral } = integrals({ kind: 'shapes', background: 0, combine: 'add', shapes: [ellipse(2, 0.1, -0.2, 0.5, 0.3, 25), ellipse(-0.7, 0.3, 0.1, 0.2, 0.45, -70)] });
    for (const ray of rays) expect(integral(ray)).toBeCloseTo(ellipseProjection(2, 0.1, -0.2, 0.5, 0.3, 25, ray) + ellipseProjection(-0.7, 0.3, 0.1, 0.2, 0.45, -70, ray), 13);
  });

  it('of a background are the chord of the disc', () => {
    const { integral } = integrals({ kind: 'shapes', background: 3, shapes: [] });
    for (const ray of rays) expect(integral(ray)).toBeCloseTo(6 * Math.sqrt(1 - ray.offset ** 2), 13);
  });

  it('let a later shape replace what lies below it, and add where the truth adds (chords by hand)', () => {
    const shapes = [ellipse(2, 0, 0, 0.8, 0.8), ellipse(5, 0.2, 0, 0.4, 0.4)];
    const ray = rayAt(90, 0);
    expect(integrals({ kind: 'shapes', background: 1, shapes }).integral(ray)).toBeCloseTo(1 * 0.4 + 2 * 0.8 + 5 * 0.8, 13);
    expect(integrals({ kind: 'shapes', background: 1, combine: 'add', shapes }).integral(ray)).toBeCloseTo(1 * 2 + 2 * 1.6 + 5 * 0.8, 13);
  });

  it('of a ring are those of its two circles', () => {
    const { integral } = integrals({ kind: 'shapes', background: 0, shapes: [{ kind: 'annulus', label: 'ring', value: 1.5, x: 0.1, y: 0.2, innerRadius: 0.3, outerRadius: 0.6 }] });
    for (const ray of rays) expect(integral(ray)).toBeCloseTo(ellipseProjection(1.5, 0.1, 0.2, 0.6, 0.6, 0, ray) - ellipseProjection(1.5, 0.1, 0.2, 0.3, 0.3, 0, ray), 13);
  });

  it('of a square follow the closed form of a pixel, also through its corners', () => {
    const { integral } = integrals({ kind: 'shapes', background: 0, shapes: [{ kind: 'polygon', label: 'square', value: 1, vertices: [[-0.4, -0.4], [0.4, -0.4], [0.4, 0.4], [-0.4, 0.4]] }] });
    // The projection of a square of side a at angle theta is a trapezium: top min(a / |cos|, a / |sin|), feet at a (|cos| + |sin|) / 2.
    const trapezium = (angleDeg: number, s: number): number => {
      const c = Math.abs(Math.cos((angleDeg * Math.PI) / 180));
      const d = Math.abs(Math.sin((angleDeg * Math.PI) / 180));
      const foot = 0.4 * (c + d);
      const shoulder = 0.4 * Math.abs(c - d);
      const top = 0.8 / Math.max(c, d);
      return Math.abs(s) >= foot ? 0 : Math.abs(s) <= shoulder ? top : (top * (foot - Math.abs(s))) / (foot - shoulder);
    };
    for (const angle of [0, 10, 33, 45, 60, 90, 170, 225]) for (const s of [-0.55, -0.3, 0, 0.07, 0.41, 0.5]) if (angle % 90 !== 0 || Math.abs(s) !== 0.4) expect(integral(rayAt(angle, s))).toBeCloseTo(trapezium(angle, s), 12);
  });

  it('of a smooth bump follow the closed form 16/15 c^5 (integral of (c^2 - t^2)^2, by hand)', () => {
    const { integral } = integrals({ kind: 'shapes', background: 0, combine: 'add', shapes: [{ ...ellipse(2, 0.1, 0.1, 0.5, 0.5), kind: 'bump' }] });
    for (const ray of rays) {
      const s = (ray.offset - 0.1 * ray.nx - 0.1 * ray.ny) / 0.5;
      expect(integral(ray)).toBeCloseTo(Math.abs(s) < 1 ? 2 * 0.5 * (16 / 15) * (1 - s * s) ** 2.5 : 0, 13);
    }
  });

  it('of an expression and of an image converge to the closed form', () => {
    const gaussian = integrals({ kind: 'expression', background: 0, expression: 'exp(-(x^2 + y^2) / 0.02)' });
    // The disc cuts the Gaussian at 50 exponents: nothing is lost.
    for (const ray of rays) expect(gaussian.integral(ray)).toBeCloseTo(Math.sqrt(0.02 * Math.PI) * Math.exp(-(ray.offset ** 2) / 0.02), 5);
    const plane = Float64Array.from({ length: 64 }, (_, k) => 3 + 0.25 * ((k % 8) + 0.5 - 4) - 0.5 * (4 - Math.floor(k / 8) - 0.5));
    const image = integrals({ kind: 'array', background: 0, sha256: '0'.repeat(64), rows: 8, cols: 8, extent: { xMin: -0.4, xMax: 0.4, yMin: -0.4, yMax: 0.4 } }, plane);
    // Inside the pixel centres the image is the plane 3 + 2.5 x - 5 y: its integral is the value at the middle times the length.
    const inner = (angle: number): number => image.integral(rayAt(angle, 0)) - 2 * 0.05 * 3;
    // Along y = 0 and x = 0 the two outer half pixels hold the values of the rim, 0.35 from the middle.
    expect(inner(90)).toBeCloseTo(3 * 0.7, 12);
    expect(inner(0)).toBeCloseTo(3 * 0.7, 12);
  });
});

describe('Rays of a fan', () => {
  it('start at the source, and are those of parallel views (Kak and Slaney 1988, section 3.4)', () => {
    const geometry = fan();
    for (const angle of viewAngles(geometry)) {
      const [c, s] = directionOf(angle);
      const rayOf = viewRays(geometry, angle);
      for (const u of [-1.5, -0.2, 0, 0.9]) {
        const ray = rayOf(u);
        expect(Math.hypot(ray.nx, ray.ny)).toBeCloseTo(1, 14);
        // Source and detector point both lie on the line.
        expect(3 * (c * ray.nx + s * ray.ny)).toBeCloseTo(ray.offset, 13);
        expect((-1.5 * c - u * s) * ray.nx + (-1.5 * s + u * c) * ray.ny).toBeCloseTo(ray.offset, 13);
        // theta = beta + 90 degrees + gamma, s = D sin gamma, gamma the angle of the ray to the central one.
        const gamma = Math.atan2(u, 4.5);
        expect(ray.offset).toBeCloseTo(3 * Math.sin(gamma), 13);
        expect(ray.nx).toBeCloseTo(Math.cos((angle * Math.PI) / 180 + Math.PI / 2 - gamma), 13);
      }
    }
  });
});

describe('The projection matrix', () => {
  const random = (n: number, name: string): Float64Array => {
    const stream = new RandomStream(deriveKey(name));
    return Float64Array.from({ length: n }, () => 2 * stream.nextUniform() - 1);
  };

  it('has the lengths of every ray in every cell (Siddon 1985 against the closed form of a square)', () => {
    for (const geometry of [parallel({ cells: 9 }), fan({ cells: 8 })]) {
      const grid = xrayCells(geometry);
      for (const angle of viewAngles(geometry))
        for (const u of [-0.71, -0.05, 0.33, 0.8]) {
          const ray = viewRays(geometry, angle)(u);
          const lengths = new Map<number, number>();
          siddon(grid, 1, ray, (cell, length) => lengths.set(cell, (lengths.get(cell) ?? 0) + length));
          let sum = 0;
          for (const length of lengths.values()) sum += length;
          expect(sum).toBeCloseTo(Math.abs(ray.offset) < 1 ? 2 * Math.sqrt(1 - ray.offset ** 2) : 0, 12);
          for (const cell of grid.inside) {
            const x0 = grid.xMin + (cell % grid.nx) * grid.dx;
            const y0 = grid.yMin + Math.floor(cell / grid.nx) * grid.dy;
            const { integral } = integrals({ kind: 'shapes', background: 0, shapes: [{ kind: 'polygon', label: 'cell', value: 1, vertices: [[x0, y0], [x0 + grid.dx, y0], [x0 + grid.dx, y0 + grid.dy], [x0, y0 + grid.dy]] }] });
            expect(lengths.get(cell) ?? 0).toBeCloseTo(integral(ray), 12);
          }
        }
    }
  });

  it('agrees with Joseph 1982 on a smooth image, and both with the closed form, at the order of the cells', () => {
    const truth = { kind: 'shapes', background: 0, combine: 'add', shapes: [{ ...ellipse(1, 0.1, -0.1, 0.6, 0.5, 20), kind: 'bump' }] };
    const errorOf = (cells: number, projector: typeof siddon): number => {
      const geometry = parallel({ cells, detectors: 40, detectorSpacing: 0.05 });
      const definition = plainTruthSchema.parse(truth);
      const field = createTruthField(definition, undefined, plainRange());
      const clean = projectTruth(geometry, rayIntegrals(field, definition, geometry));
      const problem = createProblem({ family: 'x-ray', geometry, dataKind: 'absolute', background: 0 });
      const matrix = systemMatrix(geometry, xrayCells(geometry), projector);
      const data = new Float64Array(matrix.rows);
      applySparse(matrix, problem.project(field), data);
      return norm2(data.map((v, i) => v - clean[i])) / norm2(clean);
    };
    for (const projector of [siddon, joseph]) {
      expect(errorOf(20, projector)).toBeLessThan(0.05);
      expect(errorOf(80, projector)).toBeLessThan(errorOf(20, projector) / 4);
    }
  });

  it('has its transpose as adjoint, explicit nowhere', () => {
    const problem = createProblem({ family: 'x-ray', geometry: fan(), dataKind: 'absolute', background: 0.2 });
    const derivative = problem.linearise(problem.background());
    expect(derivative.values).toBeUndefined();
    const x = random(problem.unknowns, 'x');
    const y = random(problem.dataSize, 'y');
    const ax = new Float64Array(problem.dataSize);
    const aty = new Float64Array(problem.unknowns);
    derivative.apply(x, ax);
    derivative.applyAdjoint(y, aty);
    expect(Math.abs(dot(ax, y) - dot(x, aty))).toBeLessThan(1e-12 * norm2(ax) * norm2(y));
    expect(problem.evaluate(x)).toEqual(ax);
  });
});

describe('An X-ray geometry', () => {
  it('is refused with a source in the body, distances of the other beam, or more rays than a matrix holds', () => {
    const faultOf = (changes: Partial<XrayGeometry>): string | undefined => xrayGeometrySchema.safeParse({ ...parallel(), ...changes }).error?.issues[0].message;
    expect(faultOf({ beam: 'fan', sourceDistance: 1, detectorDistance: 1 })).toMatch(/outside the body/);
    expect(faultOf({ beam: 'fan', sourceDistance: 3 })).toMatch(/distance of the detector/);
    expect(faultOf({ sourceDistance: 3 })).toMatch(/no source distance/);
    expect(faultOf({ views: 720, detectors: 1000 })).toMatch(/At most 65536 rays/);
    expect(faultOf({ views: 64, detectors: 1024 })).toBeUndefined();
  });
});

describe('An X-ray phantom', () => {
  const definition = phantomDefinitionSchema.parse({
    family: 'x-ray', geometry: parallel({ views: 10, detectors: 24, detectorSpacing: 2 / 24 }),
    truth: { kind: 'shapes', background: 0.5, combine: 'add', shapes: [ellipse(1, 0.1, 0.2, 0.4, 0.3, 30)] },
  }) as DefinitionOf<'x-ray'>;

  it('is simulated with more lines than it is inverted with, and says the gap', () => {
    const problem = createProblem(describeProblem(definition));
    const simulated = simulate(definition, undefined, problem);
    expect(simulated.clean.length).toBe(240);
    expect(layoutSize(dataLayout(definition))).toBe(240);
    expect(simulated.truthImage.length).toBe(problemGrid(definition).inside.length);
    expect(problemFacts(definition)).toMatchObject({ dataSize: 240, unknowns: problem.unknowns });
    expect(simulated.modelErrorFloor).toBeGreaterThan(1e-4);
    expect(simulated.modelErrorFloor).toBeLessThan(0.05);
    // Cells clipped to the disc hold a constant exactly; only the lines over a detector cell differ, at the rim.
    expect(simulated.backgroundGap).toBeLessThan(5e-3);
    expect(simulated.targets).toHaveLength(1);
    expect(simulated.targets[0].contrast).toBe(1);
    expect(problemLine(definition)).toBe('10 parallel views over 180°, 24 detector cells');
    expect(dataLayout(definition).groupNames[1]).toBe('view 18°');
  });

  it('keeps the mass of every view (zeroth moment; Helgason 1965, Ludwig 1966)', () => {
    const { clean } = simulate(definition);
    const mass = 0.5 * Math.PI + Math.PI * 0.12;
    for (let view = 0; view < 10; view++) {
      let sum = 0;
      for (let cell = 0; cell < 24; cell++) sum += clean[24 * view + cell] * definition.geometry.detectorSpacing;
      // The middles of 192 lines across the disc: the end of a square root is off by h^(3/2).
      expect(sum / mass).toBeCloseTo(1, 3);
      expect(detectorCentre(definition.geometry, 0)).toBeCloseTo(-1 + 1 / 24, 14);
    }
  });

  it('is refused without a signal, and with a shape outside the body', () => {
    const empty = { ...definition, truth: { ...definition.truth, background: 0, shapes: [] } } as DefinitionOf<'x-ray'>;
    expect(() => simulate(empty)).toThrow(/nothing that noise could be relative to/);
    const outside = { ...definition, truth: { kind: 'shapes', background: 0, shapes: [ellipse(1, 3, 0, 0.2, 0.2)] } } as DefinitionOf<'x-ray'>;
    expect(() => simulate(outside)).toThrow(/lies outside/);
  });
});
