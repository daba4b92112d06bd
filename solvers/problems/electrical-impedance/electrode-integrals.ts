import type { QuadraticMesh } from '../../mesh/quadratic-mesh';
import { electrodeAt, type ElectrodeFrame } from './electrodes';
import { edgeShapes, edgeSpeed, gaussPoints, gaussWeights } from './elements';

/** Boundary integrals of one electrode, lengths in radii. */
export interface ElectrodeIntegrals {
  /** Nodes under the electrode and the integrals of their shape functions. */
  readonly nodes: Int32Array;
  readonly moments: Float64Array;
  /** Length of the electrode (sum of the moments). */
  readonly length: number;
  /** Edges under it, three nodes each, and their 3 x 3 mass matrices, nine values each. */
  readonly edges: Int32Array;
  readonly masses: Float64Array;
}

/** @param mesh in the frame; the ends of the electrodes must be boundary nodes */
export function electrodeIntegrals(mesh: QuadraticMesh, frame: ElectrodeFrame): ElectrodeIntegrals[] {
  const { nodes, boundaryEdges } = mesh;
  const owner = new Int32Array(boundaryEdges.length / 3);
  for (let e = 0; e < owner.length; e++) {
    const m = boundaryEdges[3 * e + 2];
    owner[e] = electrodeAt(frame, frame.boundary.arcLengthOf(nodes[2 * m], nodes[2 * m + 1]));
  }
  const result: ElectrodeIntegrals[] = [];
  for (let l = 0; l < frame.count; l++) {
    const edges: number[] = [];
    const masses: number[] = [];
    const moments = new Map<number, number>();
    for (let e = 0; e < boundaryEdges.length; e += 3) {
      const a = boundaryEdges[e];
      const b = boundaryEdges[e + 1];
      const m = boundaryEdges[e + 2];
      if (owner[e / 3] !== l) continue;
      edges.push(a, b, m);
      const mass = new Float64Array(9);
      const moment = [0, 0, 0];
      for (let g = 0; g < gaussPoints.length; g++) {
        const shape = edgeShapes(gaussPoints[g]);
        const weight = gaussWeights[g] * edgeSpeed(nodes, a, b, m, gaussPoints[g]);
        for (let i = 0; i < 3; i++) {
          moment[i] += weight * shape[i];
          for (let j = 0; j < 3; j++) mass[3 * i + j] += weight * shape[i] * shape[j];
        }
      }
      masses.push(...mass);
      [a, b, m].forEach((node, i) => moments.set(node, (moments.get(node) ?? 0) + moment[i]));
    }
    const electrodeNodes = Int32Array.from(moments.keys()).sort();
    const values = new Float64Array(electrodeNodes.length);
    let length = 0;
    for (let i = 0; i < electrodeNodes.length; i++) {
      values[i] = moments.get(electrodeNodes[i]) ?? 0;
      length += values[i];
    }
    if (edges.length === 0) throw new RangeError(`Electrode ${l + 1} covers no edge of the mesh.`);
    result.push({ nodes: electrodeNodes, moments: values, length, edges: Int32Array.from(edges), masses: Float64Array.from(masses) });
  }
  return result;
}
