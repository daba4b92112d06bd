import type { EitGeometry } from '../../shared/domain/geometry/electrical-impedance';
import { analyse, factorise } from '../../solvers/linear-algebra/sparse-cholesky';
import { meshPattern } from '../../solvers/problems/electrical-impedance/assembly';
import { electrodeIntegrals } from '../../solvers/problems/electrical-impedance/electrode-integrals';
import { systemValues, type ElectrodeModel } from '../../solvers/problems/electrical-impedance/electrode-model';
import { electrodeFrame } from '../../solvers/problems/electrical-impedance/electrodes';
import { contactNumber, contactNumbers, sampleConductivity, simulateElectricalImpedance } from '../../solvers/problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../../solvers/problems/electrical-impedance/simulation-mesh';
import { createTruthField, type TruthField } from '../../solvers/truth/truth-field';

/** Median seconds of each stage of one simulation; `unknowns` and `elements` say how large it was. */
export interface SimulationTimes {
  readonly unknowns: number;
  readonly elements: number;
  readonly mesh: number;
  readonly conductivity: number;
  readonly assembly: number;
  readonly analysis: number;
  readonly factorisation: number;
  /** All electrodes at once. */
  readonly solve: number;
  /** Truth and reference, all patterns, from the definition to the data. */
  readonly whole: number;
}

/** The disc of the reference cases: radius 0.25 at (0.3, 0.2), five times the background, contact impedance 1e-3 ohm m^2. */
export const benchTruth: TruthField = createTruthField({
  kind: 'shapes',
  background: 1,
  shapes: [{ kind: 'ellipse', label: 'disc', target: true, value: 5, x: 0.3, y: 0.2, semiAxisA: 0.25, semiAxisB: 0.25, angleDeg: 0 }],
});

export function benchGeometry(electrodes: EitGeometry['electrodes'] = 16): EitGeometry {
  return {
    body: { kind: 'disc', radius: 1 }, electrodes, electrodeCoverage: 0.5, firstElectrodeDeg: 0, numbering: 'counter-clockwise',
    contactImpedance: 1e-3, pattern: 'adjacent', current: 1, measurement: 'adjacent-undriven',
  };
}

/** Times the stages `repeats` times in turn, after one round that warms up the engine. */
export function timeSimulation(repeats = 5, geometry = benchGeometry(), truth = benchTruth): SimulationTimes {
  const stages: Record<'mesh' | 'conductivity' | 'assembly' | 'analysis' | 'factorisation' | 'solve' | 'whole', number[]> = {
    mesh: [], conductivity: [], assembly: [], analysis: [], factorisation: [], solve: [], whole: [],
  };
  let unknowns = 0;
  let elements = 0;
  for (let round = 0; round <= repeats; round++) {
    const timed = <T>(stage: keyof typeof stages, work: () => T): T => {
      const start = performance.now();
      const result = work();
      if (round > 0) stages[stage].push((performance.now() - start) / 1000);
      return result;
    };
    const frame = electrodeFrame(geometry);
    const contact = contactNumber(geometry, truth.background);
    const mesh = timed('mesh', () => simulationMesh(truth, frame, simulationDetail(contact)).quadratic);
    const sigma = timed('conductivity', () => sampleConductivity(truth, mesh, frame));
    const electrodes = electrodeIntegrals(mesh, frame);
    const pattern = timed('assembly', () => meshPattern(mesh));
    const analysis = timed('analysis', () => analyse(pattern));
    const model: ElectrodeModel = { mesh, pattern, analysis, electrodes };
    const values = timed('assembly', () => systemValues(model, sigma, contactNumbers(geometry, truth.background).map((value) => value / truth.background)));
    const factor = timed('factorisation', () => factorise(analysis, values));
    const columns = new Float64Array(pattern.n * electrodes.length);
    electrodes.forEach((electrode, l) => electrode.nodes.forEach((node, i) => (columns[l * pattern.n + node] = electrode.moments[i])));
    timed('solve', () => factor.solveMany(columns, electrodes.length));
    timed('whole', () => simulateElectricalImpedance(truth, geometry));
    unknowns = pattern.n + electrodes.length;
    elements = mesh.elements.length / 6;
  }
  // Two parts of one round make up the assembly.
  const assembly = Array.from({ length: repeats }, (_, i) => stages.assembly[2 * i] + stages.assembly[2 * i + 1]);
  return {
    unknowns, elements, mesh: median(stages.mesh), conductivity: median(stages.conductivity), assembly: median(assembly), analysis: median(stages.analysis),
    factorisation: median(stages.factorisation), solve: median(stages.solve), whole: median(stages.whole),
  };
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : 0.5 * (sorted[middle - 1] + sorted[middle]);
}
