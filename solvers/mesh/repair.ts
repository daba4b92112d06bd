import { qualityOf } from './quality';
import type { SizeField } from './size-field';

/** Below this shape a triangle is worked on (0.5 is about a smallest angle of 17 degrees for an isosceles one). */
const wanted = 0.55;
/** Below this shape a vertex may be removed. */
const unacceptable = 0.3;

/**
 * Better points for the triangles of bad shape: free vertices move to the place, among a few towards the centre of their
 * neighbours, where the worst triangle around them is best; where that does not help, a free vertex of the triangle goes.
 * @returns new coordinates, or null when every triangle is good enough or nothing more can be done
 */
export function repair(coords: Float64Array, triangles: Int32Array, fixed: number, field: SizeField): Float64Array | null {
  const n = coords.length / 2;
  const bad: number[] = [];
  for (let t = 0; t < triangles.length; t += 3) if (qualityOf(coords, triangles[t], triangles[t + 1], triangles[t + 2]) < wanted) bad.push(t);
  if (bad.length === 0) return null;
  const start = new Int32Array(n + 1);
  for (let k = 0; k < triangles.length; k++) start[triangles[k] + 1]++;
  for (let i = 0; i < n; i++) start[i + 1] += start[i];
  const around = new Int32Array(triangles.length);
  const next = start.slice(0, n);
  for (let k = 0; k < triangles.length; k++) around[next[triangles[k]]++] = k - (k % 3);
  const moved = coords.slice();
  const removed = new Uint8Array(n);
  let changes = 0;
  const worstAround = (v: number): number => {
    let worst = 1;
    for (let k = start[v]; k < start[v + 1]; k++) {
      const t = around[k];
      const q = qualityOf(moved, triangles[t], triangles[t + 1], triangles[t + 2]);
      if (q < worst) worst = q;
    }
    return worst;
  };
  for (const t of bad) {
    for (let corner = 0; corner < 3; corner++) {
      const v = triangles[t + corner];
      if (v < fixed) continue;
      const x0 = moved[2 * v];
      const y0 = moved[2 * v + 1];
      let sx = 0;
      let sy = 0;
      let weight = 0;
      for (let k = start[v]; k < start[v + 1]; k++) {
        for (let c = 0; c < 3; c++) {
          const w = triangles[around[k] + c];
          if (w === v) continue;
          const f = 1 / field.at(moved[2 * w], moved[2 * w + 1]);
          sx += f * moved[2 * w];
          sy += f * moved[2 * w + 1];
          weight += f;
        }
      }
      const cx = sx / weight;
      const cy = sy / weight;
      let best = worstAround(v);
      let share = 0;
      for (let trial = 1; trial <= 5; trial++) {
        const s = trial / 4;
        moved[2 * v] = x0 + s * (cx - x0);
        moved[2 * v + 1] = y0 + s * (cy - y0);
        const q = worstAround(v);
        if (q > best + 1e-3) {
          best = q;
          share = s;
        }
      }
      moved[2 * v] = x0 + share * (cx - x0);
      moved[2 * v + 1] = y0 + share * (cy - y0);
      if (share > 0) changes++;
    }
  }
  for (const t of bad) {
    const corners = [triangles[t], triangles[t + 1], triangles[t + 2]];
    if (corners.some((v) => removed[v] === 1) || qualityOf(moved, corners[0], corners[1], corners[2]) >= unacceptable) continue;
    const free = corners.filter((v) => v >= fixed);
    if (free.length === 0) continue;
    removed[free[0]] = 1;
    changes++;
  }
  if (changes === 0) return null;
  const result = new Float64Array(2 * n);
  let count = 0;
  for (let i = 0; i < n; i++) {
    if (removed[i]) continue;
    result[count++] = moved[2 * i];
    result[count++] = moved[2 * i + 1];
  }
  return result.slice(0, count);
}
