import { meshBody, type TriangleMesh } from '../../mesh/body-mesh';
import type { MeshInterface } from '../../mesh/interface-graph';
import type { SizeSource } from '../../mesh/size-field';
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
  /** Largest relative change of a truth that varies between interfaces over one edge, and the smallest edge it may ask for. */
  readonly variation: number;
  readonly variationFloor: number;
  readonly seed: number;
  readonly maxVertices: number;
}

export type DetailLevel = 'coarse' | 'normal' | 'fine';

/** Edges of the coarse level over those of the normal one. */
export const coarseFactor = 1.6;

/**
 * Detail of a simulation. Where the contact impedance is small the potential behaves like the square root of the distance to an
 * electrode end down to distances of about z sigma / R, so the smallest edge follows that figure.
 * @param contact z sigma / R, a pure number
 */
export function simulationDetail(contact: number, level: DetailLevel = 'normal'): SimulationDetail {
  const factor = level === 'coarse' ? coarseFactor : level === 'fine' ? 0.6 : 1;
  const hMin = Math.min(5e-4, Math.max(1e-5, 0.15 * contact));
  return {
    grading: 0.18 * factor,
    tipGrading: 0.5,
    hMin: hMin * factor,
    hMax: 0.12 * factor,
    interfaceSize: 0.035 * factor,
    curvatureShare: 0.25 * factor,
    cornerGrading: 0.35 * factor,
    cornerMinimum: 3e-4 * factor,
    growth: 0.3,
    variation: 0.25 * factor,
    variationFloor: 0.005 * factor,
    seed: level === 'coarse' ? 3 : level === 'fine' ? 5 : 1,
    maxVertices: level === 'fine' ? 90_000 : 30_000,
  };
}

export interface SimulationMesh {
  readonly triangles: TriangleMesh;
  readonly quadratic: QuadraticMesh;
}

/**
 * Mesh of the body in the electrode frame, conforming to the interfaces of the truth. A truth that would need more
 * vertices than `maxVertices` gets larger elements, step by step.
 */
export function simulationMesh(truth: TruthField, frame: ElectrodeFrame, detail: SimulationDetail): SimulationMesh {
  const interfaces = truth.interfaces.map((curve) => inFrame(curve, frame));
  for (let attempt = 0; ; attempt++) {
    // Coarser away from the electrode ends first: the grading towards them costs a fixed number of elements.
    const f = [1, 1.4, 2, 3][attempt];
    const sized = {
      ...detail,
      interfaceSize: detail.interfaceSize * f,
      curvatureShare: detail.curvatureShare * f,
      cornerGrading: Math.min(0.7, detail.cornerGrading * f),
      cornerMinimum: detail.cornerMinimum * f * f,
      grading: Math.min(0.7, detail.grading * Math.sqrt(f)),
    };
    const sources = truth.piecewiseConstant ? [] : variationSources(truth, frame, detail.variation * f, detail.variationFloor * f, detail.hMax);
    try {
      const triangles = meshBody({ boundary: frame.boundary, ends: frame.ends, interfaces, sources, ...sized });
      return { triangles, quadratic: quadraticMesh(triangles, interfaces) };
    } catch (error) {
      if (attempt === 3 || !(error instanceof RangeError)) throw error;
    }
  }
}

const samplesPerSide = 128;

/** Where the truth varies between interfaces: edges over which it would change by more than `variation` times its value. */
function variationSources(truth: TruthField, frame: ElectrodeFrame, variation: number, floor: number, hMax: number): SizeSource[] {
  const n = samplesPerSide;
  const half = frame.boundary.reach / 1.1;
  const step = (2 * half) / n;
  const values = new Float64Array(n * n).fill(NaN);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const x = -half + (i + 0.5) * step;
      const y = -half + (j + 0.5) * step;
      if (frame.boundary.inside(x, y)) values[j * n + i] = truth.valueAt(...frame.toBody(x, y));
    }
  }
  const sources: { x: number; y: number; size: number }[] = [];
  for (let j = 1; j < n; j++) {
    for (let i = 1; i < n; i++) {
      const v = values[j * n + i];
      const change = Math.max(relativeChange(v, values[j * n + i - 1]), relativeChange(v, values[(j - 1) * n + i]));
      const size = (variation * step) / change;
      if (size < hMax) sources.push({ x: -half + i * step, y: -half + j * step, size });
    }
  }
  // The smallest edge rises until the places that ask for it need no more elements than a simulation can spare.
  let smallest = floor;
  while (elementsFor(sources, smallest, step) > elementsToSpare && smallest < hMax) smallest *= 1.2;
  for (const source of sources) source.size = Math.max(smallest, source.size);
  return sources;
}

const elementsToSpare = 12_000;

function elementsFor(sources: readonly SizeSource[], smallest: number, step: number): number {
  let count = 0;
  for (const { size } of sources) {
    const h = Math.max(smallest, size);
    count += (step * step) / (0.433 * h * h);
  }
  return count;
}

function relativeChange(a: number, b: number): number {
  return a > 0 && b > 0 ? Math.abs(a - b) / Math.min(a, b) : 0;
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
