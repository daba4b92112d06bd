import { describe, expect, it } from 'vitest';
import { phantomDefinitionSchema, type DefinitionOf } from '../../../shared/domain/phantom-definition';
import { axisCase, axisProblem } from '../../../solvers/campaign/axes/axis-case';
import { derivedDefinition } from '../../../solvers/campaign/axes/derived-definition';
import { keptRows } from '../../../solvers/campaign/axes/kept-rows';
import { prepareRun, runLevel } from '../../../solvers/campaign/run';
import { denseMatrix } from '../../../solvers/core/matrix-operator';
import { norm2 } from '../../../solvers/core/vector';
import { createProblem, describeProblem, simulate } from '../../../solvers/problems/registry';
import { ellipse, unitGeometry } from '../../support/impedance-case';

const definition = phantomDefinitionSchema.parse({
  family: 'electrical-impedance', dataKind: 'difference', noiseReference: 'voltages',
  truth: { kind: 'shapes', background: 1, shapes: [ellipse(0.3, 0.2, 0.25, 0.25, 4)] }, geometry: unitGeometry({ electrodes: 8 }),
}) as DefinitionOf<'electrical-impedance'>;
const problem = createProblem(describeProblem(definition));
const itself = simulate(definition, undefined, problem);
const gap = (a: Float64Array, b: Float64Array): number => norm2(a.map((v, i) => v - b[i])) / norm2(b);

describe('contrast', () => {
  it('at factor 1 is the phantom itself, bit for bit', () => {
    expect(axisCase(definition, undefined, problem, 'contrast', 1).simulated.clean).toEqual(itself.clean);
  });
  it('scales logarithms of conductivities: half of it turns 4 into 2, twice into 16', () => {
    for (const [factor, value] of [[0.5, 2], [2, 16]] as const) {
      const { truth } = derivedDefinition(definition, 'contrast', factor);
      expect(truth.kind === 'shapes' && truth.shapes[0].value).toBeCloseTo(value, 12);
    }
  });
  it('gives an expression the same values', () => {
    const derived = derivedDefinition({ ...definition, truth: { kind: 'expression', background: 2, expression: '2 + x' } }, 'contrast', 0.5);
    expect(derived.truth).toMatchObject({ kind: 'expression', expression: '2 * ((2 + x) / 2)^0.5' });
  });
  it('refuses a level beyond the limits of the schema, with the field', () => {
    const extreme = { ...definition, truth: { kind: 'shapes' as const, background: 1, shapes: [ellipse(0.3, 0.2, 0.25, 0.25, 1000)] } };
    expect(() => derivedDefinition(extreme, 'contrast', 3)).toThrow(/truth\.shapes\.0\.value/);
  });
});

describe('an experiment that differs from the model', () => {
  it.each(['electrode-displacement', 'contact-impedance', 'body-outline'] as const)('%s: small levels change the data little, larger ones more', (axis) => {
    const [small, large] = [0.01, 0.04].map((level) => {
      const { simulated, rows } = axisCase(definition, undefined, problem, axis, level);
      expect(rows).toBeNull();
      expect(simulated.truthImage).toHaveLength(problem.grid.inside.length);
      return gap(simulated.clean, itself.clean);
    });
    expect(small).toBeGreaterThan(1e-5);
    expect(small).toBeLessThan(0.1);
    // First order in the level: four times the level gives about four times the change.
    expect(large / small).toBeGreaterThan(2.5);
    expect(large / small).toBeLessThan(6);
  });
  it('moves every electrode by the same normal numbers at every level, within the gap', () => {
    const angles = (level: number): number[] => {
      const { geometry } = derivedDefinition(definition, 'electrode-displacement', level) as typeof definition;
      return geometry.electrodeAnglesDeg!.map((angle, l) => {
        const turn = (angle - 45 * l) % 360;
        return turn > 180 ? turn - 360 : turn < -180 ? turn + 360 : turn;
      });
    };
    const [a, b] = [angles(0.01), angles(0.02)];
    a.forEach((turn, l) => {
      expect(b[l]).toBeCloseTo(2 * turn, 9);
      expect(Math.abs(turn)).toBeLessThanOrEqual(0.22 * 45);
    });
  });
  it('refuses families without electrodes', () => {
    const blur = phantomDefinitionSchema.parse({
      family: 'deblurring', truth: { kind: 'shapes', background: 0, shapes: [] },
      geometry: { body: { kind: 'rectangle', width: 1, height: 1 }, pointSpread: 'gaussian', spread: 0.05, cells: 16, edge: 'zero' },
    });
    expect(() => derivedDefinition(blur, 'contact-impedance', 0.1)).toThrow(/needs electrodes/);
    expect(() => keptRows(blur, 'missing-angles', 0.5)).toThrow(/views/);
  });
});

describe('missing channels', () => {
  it('loses those of a lower level too, and leaves at least two', () => {
    const few = new Set(keptRows(definition, 'missing-channels', 0.5));
    const many = new Set(keptRows(definition, 'missing-channels', 0.2));
    expect(few.size).toBe(20);
    expect(many.size).toBe(32);
    for (const row of few) expect(many.has(row)).toBe(true);
    expect(keptRows(definition, 'missing-channels', 0.999)).toHaveLength(2);
  });
  it('restricts data, model and derivative alike, and a run gives an image', () => {
    const { simulated, rows } = axisCase(definition, undefined, problem, 'missing-channels', 0.5);
    const restricted = axisProblem(problem, rows);
    expect(restricted.dataSize).toBe(20);
    expect(simulated.clean).toEqual(Float64Array.from(rows!, (row) => itself.clean[row]));
    expect(simulated.noiseScale).toBeCloseTo(norm2(Float64Array.from(rows!, (row) => itself.frame[row])), 14);
    const background = problem.background();
    const whole = denseMatrix(problem.linearise(background));
    const kept = denseMatrix(restricted.linearise(background));
    rows!.forEach((row, i) => expect(kept.subarray(i * problem.unknowns, (i + 1) * problem.unknowns)).toEqual(whole.subarray(row * problem.unknowns, (row + 1) * problem.unknowns)));
    const prepared = prepareRun({ problem: restricted, method: 'tikhonov', parameters: {}, rule: null });
    const [trial] = runLevel(prepared, simulated, { benchSeed: 1, phantomHash: 'p', levelIndex: 0, level: 0.001, draws: [0] });
    expect(trial.metrics['relative-l2-error'].value).toBeLessThan(1);
  });
});
