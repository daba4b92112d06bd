/**
 * Current lines of a pair of point electrodes on a uniform disc. The stream function at z is the angle under which the two
 * electrodes are seen, so every line is a circular arc through both (inscribed angle theorem), and equal steps of the angle
 * carry equal shares of the current. It runs from half the central angle on the far rim to that plus pi on the near rim.
 */
export interface Arc {
  readonly radius: number;
  /** SVG flags of the arc from the first point to the second, y axis pointing up. */
  readonly large: boolean;
  readonly inside: boolean;
  /** Centre in the coordinates of the points. */
  readonly centre: readonly [number, number];
}

/** Lines of the pair at angles `first` and `second` (radians); beyond each, seen from the pair, runs the given share of the current. */
export function pairCurrentLines(first: number, second: number, bodyRadius: number, shares: readonly number[]): Arc[] {
  const p: [number, number] = [bodyRadius * Math.cos(first), bodyRadius * Math.sin(first)];
  const q: [number, number] = [bodyRadius * Math.cos(second), bodyRadius * Math.sin(second)];
  const middle: [number, number] = [(p[0] + q[0]) / 2, (p[1] + q[1]) / 2];
  const halfChord = Math.hypot(p[0] - q[0], p[1] - q[1]) / 2;
  const depth = Math.hypot(...middle);
  // Unit vector from the chord towards the centre of the body; for opposite electrodes any normal of the chord.
  const inward: [number, number] = depth > 1e-12 * bodyRadius ? [-middle[0] / depth, -middle[1] / depth] : [-(q[1] - p[1]) / (2 * halfChord), (q[0] - p[0]) / (2 * halfChord)];
  const half = Math.asin(Math.min(1, halfChord / bodyRadius));
  const arcs: Arc[] = [];
  for (const share of shares) {
    const angle = half + Math.PI * share;
    const sine = Math.sin(angle);
    if (Math.abs(sine) < 1e-9) continue;
    const offset = halfChord / Math.tan(angle);
    arcs.push({
      radius: Math.abs(halfChord / sine), large: angle < Math.PI / 2, inside: angle < Math.PI,
      centre: [middle[0] + inward[0] * offset, middle[1] + inward[1] * offset],
    });
  }
  return arcs;
}
