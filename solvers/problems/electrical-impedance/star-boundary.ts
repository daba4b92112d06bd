import type { MeshBoundary } from '../../mesh/mesh-boundary';
import type { SizeSource } from '../../mesh/size-field';
import { polarAngle, type BodyCurve } from './body-curve';

/** Samples of the curve for its extent and its bends. */
const samples = 720;

/**
 * A star-shaped body of radius 1 as the boundary of a mesh.
 * @param curve in radii
 */
export function starBoundary(curve: BodyCurve): MeshBoundary {
  let farthest = 0;
  for (let i = 0; i < samples; i++) farthest = Math.max(farthest, curve.radiusAt((2 * Math.PI * i) / samples));
  /** Unit vector to the point, the curve's distance along it, and the normal there. */
  const foot = (x: number, y: number): { rho: number; c: number; s: number; r: number; nx: number; ny: number } => {
    const rho = Math.sqrt(x * x + y * y);
    const { x: cx, y: cy, dx, dy } = curve.pointTowards(x, y);
    const r = Math.sqrt(cx * cx + cy * cy);
    const speed = Math.sqrt(dx * dx + dy * dy);
    return { rho, c: cx / r, s: cy / r, r, nx: dy / speed, ny: -dx / speed };
  };
  return {
    convex: false,
    length: curve.length,
    reach: 1.1 * farthest,
    pointAt(s) {
      const { x, y } = curve.point(curve.parameterAt(s));
      return [x, y];
    },
    arcLengthOf: (x, y) => curve.arcLength(polarAngle(x, y)),
    tangent(x, y) {
      const { dx, dy } = curve.pointTowards(x, y);
      return [dx, dy];
    },
    inside: (x, y) => curve.inside(x, y),
    depth: (x, y) => curve.depth(x, y),
    nearest(x, y) {
      let px = x;
      let py = y;
      // Steps along the normal at the ray's foot; what is left is of the order of the distance cubed.
      for (let step = 0; step < 2; step++) {
        const { nx, ny } = foot(px, py);
        const depth = curve.depth(px, py);
        px += depth * nx;
        py += depth * ny;
      }
      const { c, s, r } = foot(px, py);
      return [r * c, r * s];
    },
    pullIn(coords, i, margin) {
      const x = coords[2 * i];
      const y = coords[2 * i + 1];
      const depth = curve.depth(x, y);
      if (depth >= margin) return;
      const { rho, c, s, r } = foot(x, y);
      if (rho === 0) return;
      // The depth is the way along the ray times the cosine of its slope to the normal.
      const inner = r - margin * (depth === 0 ? 1 : (r - rho) / depth);
      coords[2 * i] = inner * c;
      coords[2 * i + 1] = inner * s;
    },
    bends(share, floor) {
      const sources: SizeSource[] = [];
      for (let i = 0; i < samples; i++) {
        const { x, y, dx, dy, ddx, ddy } = curve.point((2 * Math.PI * i) / samples);
        const speed2 = dx * dx + dy * dy;
        const curvature = Math.abs(dx * ddy - dy * ddx) / (speed2 * Math.sqrt(speed2));
        if (curvature > 1) sources.push({ x, y, size: Math.max(floor, share / curvature) });
      }
      return sources;
    },
  };
}
