import { createTruthField } from '../../../solvers/truth/truth-field';
import { eitGeometrySchema } from '../../../shared/domain/geometry/electrical-impedance';
import type { QuadraticMesh } from '../../../solvers/mesh/quadratic-mesh';
import { assembleScaled, meshPattern } from '../../../solvers/problems/electrical-impedance/assembly';
import { electrodeIntegrals } from '../../../solvers/problems/electrical-impedance/electrode-integrals';
import { electrodeModel, solveElectrodes } from '../../../solvers/problems/electrical-impedance/electrode-model';
import { electrodeFrame } from '../../../solvers/problems/electrical-impedance/electrodes';
import { inversionDetail, inversionMesh } from '../../../solvers/problems/electrical-impedance/inversion-mesh';
import { currentPatterns } from '../../../solvers/problems/electrical-impedance/patterns';
import { elementsByCell, pairSensitivities, unitStiffness } from '../../../solvers/problems/electrical-impedance/sensitivity';
import { contactNumber, contactNumbers, sampleConductivity, simulateElectricalImpedance } from '../../../solvers/problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../../../solvers/problems/electrical-impedance/simulation-mesh';
import { requireClose, timeStage, type Comparison } from './compare';
import type { PeerProcess } from './peer-process';

const geometry = eitGeometrySchema.parse({
  body: { kind: 'disc', radius: 1 }, electrodes: 16, electrodeCoverage: 0.5, contactImpedance: 1e-3, pattern: 'adjacent', current: 1, measurement: 'adjacent-undriven',
});
const truth = createTruthField({
  kind: 'shapes', background: 1,
  shapes: [{ kind: 'ellipse', label: 'disc', target: true, value: 5, x: 0.3, y: 0.2, semiAxisA: 0.25, semiAxisB: 0.25, angleDeg: 0 }],
});
/** Finer than the normal level, so that there are about 50,000 unknowns. */
const finer = { grading: 0.135, hMax: 0.09, interfaceSize: 0.026, maxVertices: 40_000 };

function handMesh(peer: PeerProcess | null, name: string, mesh: QuadraticMesh): void {
  peer?.hand(`${name}-nodes`, mesh.nodes);
  peer?.hand(`${name}-elements`, mesh.elements);
}

/** A truth and its background, 16 patterns each, from the definition to the electrode voltages. */
export async function compareSimulation(peer: PeerProcess | null): Promise<Comparison[]> {
  const frame = electrodeFrame(geometry);
  const contact = contactNumber(geometry, truth.background);
  const { quadratic: mesh } = simulationMesh(truth, frame, { ...simulationDetail(contact), ...finer });
  const electrodes = electrodeIntegrals(mesh, frame);
  const zeta = contactNumbers(geometry, truth.background).map((value) => value / truth.background);
  handMesh(peer, 'simulation', mesh);
  peer?.hand('simulation-conductivity', sampleConductivity(truth, mesh, frame));
  peer?.hand('simulation-edges', Int32Array.from(electrodes.flatMap((e) => Array.from(e.edges))));
  peer?.hand('simulation-edge-electrode', Int32Array.from(electrodes.flatMap((e, l) => new Array<number>(e.edges.length / 3).fill(l))));
  peer?.hand('simulation-masses', Float64Array.from(electrodes.flatMap((e) => Array.from(e.masses))));
  peer?.hand('simulation-contacts', zeta);
  peer?.hand('simulation-currents', currentPatterns(geometry));
  let result: ReturnType<typeof simulateElectricalImpedance> | undefined;
  const times = await timeStage(peer, {
    stage: 'simulation', repetitions: 1, options: { vertices: mesh.vertexCount, background: truth.background },
    ours: { whole: () => (result = simulateElectricalImpedance(truth, geometry, { detail: finer })) },
  });
  requireClose('simulation, sum of squares of the electrode voltages', result!.electrodeVoltages.reduce((s, v) => s + v * v, 0), times.figures.squares, 1e-8);
  const size = `${result!.unknowns} unknowns, ${result!.elements} elements, truth and background, mesh included`;
  return [{ name: 'a whole electrode-model simulation, 16 patterns', size, ours: times.ours.whole, peer: times.peer?.whole ?? null, aim: 0.6 }];
}

/** The inversion's mesh: stiffness with one conductivity a cell, and the integrals behind the derivative. */
export async function compareDerivative(peer: PeerProcess | null): Promise<Comparison[]> {
  const frame = electrodeFrame(geometry);
  const contact = contactNumber(geometry, 1);
  const meshes = inversionMesh(frame, inversionDetail(contact, geometry.electrodes));
  const { elements: mesh, cellOf } = meshes;
  const model = electrodeModel(mesh, electrodeIntegrals(mesh, frame));
  const { pattern } = model;
  const cells = cellOf.reduce((most, c) => Math.max(most, c), 0) + 1;
  const stiffness = unitStiffness(mesh);
  const groups = elementsByCell(cellOf, cells);
  const conductivity = Float64Array.from({ length: cells }, (_, c) => 1 + 0.3 * Math.cos(c));
  const perElement = Float64Array.from(cellOf, (c) => conductivity[c]);
  const zeta = contactNumbers(geometry, 1);
  const fields = new Float64Array(16 * pattern.n);
  const { unitPotentials } = solveElectrodes(model, { stiffness, perElement }, zeta, new Float64Array(256).map((_, k) => (k % 17 === 0 ? 1 : 0)));
  for (let l = 0; l < 16; l++) for (let i = 0; i < pattern.n; i++) fields[16 * i + l] = unitPotentials[l * pattern.n + i];
  handMesh(peer, 'derivative', mesh);
  peer?.hand('derivative-stiffness', stiffness);
  peer?.hand('derivative-cells', cellOf);
  peer?.hand('derivative-conductivity', conductivity);
  peer?.hand('derivative-fields', fields);
  peer?.hand('derivative-positions', meshPattern(mesh).positions);
  const values = new Float64Array(pattern.rows.length);
  const pairs = new Float64Array(256 * cells);
  const times = await timeStage(peer, {
    stage: 'derivative', repetitions: 9, options: { values: values.length, cells },
    ours: { assembly: () => assembleScaled(pattern, stiffness, perElement, values), derivative: () => pairSensitivities(mesh, stiffness, groups, fields, 16, pairs) },
  });
  requireClose('assembly, sum of squares', values.reduce((s, v) => s + v * v, 0), times.figures.assembly, 1e-9);
  requireClose('derivative, sum of squares', pairs.reduce((s, v) => s + v * v, 0), times.figures.derivative, 1e-9);
  const size = `${pattern.n} nodes, ${cellOf.length} quadratic elements, ${cells} cells`;
  const { ours, peer: theirs } = times;
  return [
    {
      name: 'assembly (pattern known) and adjoint derivative, against numpy', size, aim: 0.5,
      ours: ours.assembly + ours.derivative, peer: theirs ? theirs.assembly + theirs.derivative : null,
    },
    { name: '  of it: assembly', size, ours: ours.assembly, peer: theirs?.assembly ?? null, aim: null },
    { name: '  of it: adjoint derivative', size, ours: ours.derivative, peer: theirs?.derivative ?? null, aim: null },
  ];
}
