/** Shape of a triangle, 4 sqrt(3) area / (sum of squared edges): 1 equilateral, 0 flat, negative when clockwise. */
export function triangleQuality(ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number {
  const area2 = (bx - ax) * (cy - ay) - (by - ay) * (cx - ax);
  const squares =
    (bx - ax) * (bx - ax) + (by - ay) * (by - ay) + (cx - bx) * (cx - bx) + (cy - by) * (cy - by) + (ax - cx) * (ax - cx) + (ay - cy) * (ay - cy);
  return squares > 0 ? (2 * Math.sqrt(3) * area2) / squares : 0;
}

/** The same for vertices a, b, c of a list of x, y pairs. */
export function qualityOf(coords: ArrayLike<number>, a: number, b: number, c: number): number {
  return triangleQuality(coords[2 * a], coords[2 * a + 1], coords[2 * b], coords[2 * b + 1], coords[2 * c], coords[2 * c + 1]);
}
