/** One set of draws that every engine computes: each method on each family that it serves. Runs in Node and in browsers. */
import type { FamilyKey } from '../../shared/domain/families';
import { phantomDefinitionSchema, type PhantomDefinition, type PhantomDefinitionInput } from '../../shared/domain/phantom-definition';
import { prepareRun, runLevel } from '../../solvers/campaign/run';
import { runHash, type SimulatedPhantom } from '../../solvers/campaign/trial';
import { sha256Hex } from '../../solvers/core/hash';
import { methods } from '../../solvers/methods/registry';
import { noiseModels } from '../../solvers/noise/registry';
import type { InversionProblem } from '../../solvers/problems/problem-family';
import { createProblem, describeProblem, simulate } from '../../solvers/problems/registry';

const shapes = [
  { kind: 'ellipse', label: 'left', value: 2, x: -0.35, y: 0.1, semiAxisA: 0.25, semiAxisB: 0.2, angleDeg: 20 },
  { kind: 'polygon', label: 'right', value: 0.5, vertices: [[0.2, -0.3], [0.55, -0.25], [0.35, 0.2]] },
] as const;
const impedance = {
  family: 'electrical-impedance', dataKind: 'difference', noiseReference: 'voltages', truth: { kind: 'shapes', background: 1, shapes: [...shapes] },
  geometry: { body: { kind: 'disc', radius: 1 }, electrodes: 8, electrodeCoverage: 0.5, contactImpedance: 0.05, pattern: 'trigonometric', current: 1, measurement: 'electrode-voltages' },
} as PhantomDefinitionInput;
const inputs: Record<string, PhantomDefinitionInput> = {
  // Straight corners and smooth bumps go by finite elements, smooth outlines by boundary integrals.
  'impedance, elements': impedance,
  'impedance, integrals': { ...impedance, truth: { kind: 'shapes', background: 1, shapes: [shapes[0]] } } as PhantomDefinitionInput,
  'x-ray': {
    family: 'x-ray', truth: { kind: 'shapes', background: 0, shapes: [...shapes] },
    geometry: { body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 12, arcDeg: 180, detectors: 24, detectorSpacing: 2 / 24, cells: 12 },
  } as PhantomDefinitionInput,
  'x-ray, fan': {
    family: 'x-ray', truth: { kind: 'shapes', background: 0, shapes: [...shapes] },
    geometry: { body: { kind: 'disc', radius: 1 }, beam: 'fan', views: 12, arcDeg: 360, detectors: 24, detectorSpacing: 4 / 24, sourceDistance: 3, detectorDistance: 1, cells: 12 },
  } as PhantomDefinitionInput,
  equation: { family: 'integral-equation', truth: { kind: 'standard' }, geometry: { equation: 'phillips', cells: 32, points: 32 } },
  deblurring: {
    family: 'deblurring', truth: { kind: 'shapes', background: 0, shapes: [...shapes] },
    geometry: { body: { kind: 'rectangle', width: 2, height: 2 }, pointSpread: 'disc', spread: 0.2, cells: 14, edge: 'reflective' },
  } as PhantomDefinitionInput,
};
const level = 0.01;
const draws = [0, 1];

export interface GoldenHash {
  readonly name: string;
  readonly family: FamilyKey;
  readonly hash: string;
}

interface Case {
  readonly name: string;
  readonly definition: PhantomDefinition;
  readonly problem: InversionProblem;
  readonly simulated: SimulatedPhantom;
}

/** Computes the set, one hash an item; generated one by one so that a caller can report progress. */
export function* goldenHashes(): Generator<GoldenHash> {
  for (const [name, input] of Object.entries(inputs)) {
    const definition = phantomDefinitionSchema.parse(input);
    const problem = createProblem(describeProblem(definition));
    const simulated = simulate(definition, undefined, problem);
    yield { name: `${name}: simulated data`, family: definition.family, hash: sha256Hex(simulated.clean) };
    yield* methodHashes({ name, definition, problem, simulated });
  }
}

function* methodHashes({ name, definition, problem, simulated }: Case): Generator<GoldenHash> {
  const { family, dataKind } = definition;
  for (const method of methods) {
    const { families, dataKinds } = method.capabilities;
    if (!families.includes(family) || !dataKinds.includes(dataKind) || method.unfit?.(problem)) continue;
    const prepared = prepareRun({ problem, method: method.key, parameters: {}, rule: null });
    const trials = runLevel(prepared, simulated, { benchSeed: 7, phantomHash: name, levelIndex: 0, level, draws });
    const figures = trials.map(({ imageHash, metrics }) => `${imageHash} ${Object.entries(metrics).map(([key, { value }]) => `${key}=${value}`).join(' ')}`);
    yield { name: `${name}: ${method.key}`, family, hash: runHash(figures) };
  }
  for (const { key, draw, families } of noiseModels)
    if (families.includes(family))
      yield { name: `${name}: noise ${key}`, family, hash: sha256Hex(draw(simulated.clean, level, simulated.noiseScale, { key: [1, 2], stream: [3, 4] }).data) };
}
