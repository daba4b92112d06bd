import type { QuadraticMesh } from '../mesh/quadratic-mesh';
import { simulatorFor } from '../problems/electrical-impedance/data-simulation';
import { electrodeFrame } from '../problems/electrical-impedance/electrodes';
import { inversionDetail, inversionMesh } from '../problems/electrical-impedance/inversion-mesh';
import { contactNumber } from '../problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../problems/electrical-impedance/simulation-mesh';
import { judge, type Check } from './check';
import type { ImpedanceCheckContext } from './phantom-check';

/** Two vertices are one when they lie this close, in radii. */
const coincidence = 1e-9;

export const discretisationsDifferCheck: Check<ImpedanceCheckContext> = {
  key: 'discretisations-differ',
  name: 'Discretisations differ',
  unit: 'vertices',
  bound: 0,
  comparison: 'equal',
  formula: '\\#(V_{\\mathrm{simulation}} \\cap V_{\\mathrm{inversion}}) \\text{ inside the body}',
  summary: 'Data must not be inverted on the mesh that made them (an inverse crime): the two meshes share no vertex inside the body. Boundary integrals have no mesh.',
  source: { short: 'Kaipio and Somersalo 2005', full: 'J. Kaipio, E. Somersalo, Statistical and Computational Inverse Problems, Springer 2005 (inverse crimes).', fromMemory: true },
  evaluate({ definition, truth }) {
    const { geometry } = definition;
    if (simulatorFor(truth, geometry) === 'boundary-integrals')
      return judge(this, 0, 'Vertices inside the body that simulation and inversion have in common: boundary integrals have unknowns on curves only, and no mesh.');
    const frame = electrodeFrame(geometry);
    const contact = contactNumber(geometry, truth.background);
    const simulated = simulationMesh(truth, frame, simulationDetail(contact)).quadratic;
    const inverted = inversionMesh(frame, inversionDetail(contact, geometry.electrodes)).elements;
    return judge(
      this,
      sharedInteriorVertices(simulated, inverted),
      `Vertices inside the body that the simulation (${simulated.elements.length / 6} elements) and the inversion (${inverted.elements.length / 6} elements) have in common.`,
    );
  },
};

/** Vertices off the boundary that two meshes share. */
export function sharedInteriorVertices(a: QuadraticMesh, b: QuadraticMesh): number {
  const places = new Set<string>();
  const key = (x: number, y: number): string => `${Math.round(x / coincidence)},${Math.round(y / coincidence)}`;
  for (let i = 0; i < a.vertexCount; i++) if (inside(a, i)) places.add(key(a.nodes[2 * i], a.nodes[2 * i + 1]));
  let shared = 0;
  for (let i = 0; i < b.vertexCount; i++) if (inside(b, i) && places.has(key(b.nodes[2 * i], b.nodes[2 * i + 1]))) shared++;
  return shared;
}

function inside(mesh: QuadraticMesh, i: number): boolean {
  // The vertices of the boundary come first.
  return i >= mesh.boundaryEdges.length / 3;
}
