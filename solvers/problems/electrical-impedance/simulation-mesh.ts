import { meshDisc, type TriangleMesh } from '../../mesh/disc-mesh';
import type { MeshInterface } from '../../mesh/interface-graph';
import { quadraticMesh, type QuadraticMesh } from '../../mesh/quadratic-mesh';
import type { TruthField, TruthInterface } from '../../truth/truth-field';
import type { ElectrodeFrame } from './electrodes';

/** How fine a simulation is; lengths in radii. */
export interface SimulationDetail {
  /** Edge over the distance to the nearest electrode end, and its lower bound. */
  readonly grading: number;
  /** The same right at the ends. */
  readonly tipGrading: number;
  readonly hMin: number;
  readonly hMax: number;
  readonly interfaceSize: number;
  readonly curvatureShare: number;
  readonly cornerGrading: number;
  readonly cornerMinimum: number;
  readonly growth: number;
  readonly seed: number;
}

export type DetailLevel = 'coarse' | 'normal' | 'fine';

/**
 * Detail of a simulation. Where the contact impedance is small the potential behaves like the square root of the distance to an
 * electrode end down to distances of about z sigma / R, so the smallest edge follows that figure.
 * @param contact z sigma / R, a pure number
 */
export function simulationDetail(contact: number, level: DetailLevel = 'normal'): SimulationDetail {
  const factor = level === 'coarse' ? 1.6 : level === 'fine' ? 0.6 : 1;
  const hMin = Math.min(5e-4, Math.max(1e-5, 0.15 * contact));
  return {
    grading: 0.18 * factor,
    tipGrading: 0.5,
    hMin: hMin * factor,
    hMax: 0.12 * factor,
    interfaceSize: 0.035 * factor,
    curvatureShare: 0.25 * factor,
    cornerGrading: 0.5 * factor,
    cornerMinimum: 2e-3 * factor,
    growth: 0.3,
    seed: level === 'coarse' ? 3 : level === 'fine' ? 5 : 1,
  };
}

export interface SimulationMesh {
  readonly triangles: TriangleMesh;
  readonly quadratic: QuadraticMesh;
}

/** Mesh of the unit disc in the electrode frame, conforming to the interfaces of the truth. */
export function simulationMesh(truth: TruthField | null, frame: ElectrodeFrame, detail: SimulationDetail): SimulationMesh {
  const interfaces = truth ? truth.interfaces.map((curve) => inFrame(curve, frame)) : [];
  const triangles = meshDisc({ ends: frame.ends, interfaces, ...detail });
  return { triangles, quadratic: quadraticMesh(triangles, interfaces) };
}

/** An interface given in metres, seen in the electrode frame. */
export function inFrame(curve: TruthInterface, frame: ElectrodeFrame): MeshInterface {
  return {
    corners: curve.corners,
    points(maxSpacing) {
      const points = curve.points((x, y) => {
        const [u, v] = frame.toFrame(x, y);
        return frame.radius * maxSpacing(u, v);
      });
      const turned = new Float64Array(points.length);
      for (let i = 0; i < points.length; i += 2) {
        const [u, v] = frame.toFrame(points[i], points[i + 1]);
        turned[i] = u;
        turned[i + 1] = v;
      }
      return turned;
    },
    project(x, y) {
      const [bx, by] = frame.toBody(x, y);
      const [px, py] = curve.project(bx, by);
      return frame.toFrame(px, py);
    },
  };
}
