/** A method by its error and its time; null where one is not known. */
export interface CostPoint {
  readonly id: string;
  /** Small is good. */
  readonly loss: number | null;
  readonly seconds: number | null;
}

export interface ParetoPlace {
  readonly id: string;
  /** Null where the error or the time is not known: the method then neither stands on the front nor pushes another off. */
  readonly onFront: boolean | null;
  /** A method on the front that is at least as good in both and better in one, the fastest of them; null for those on the front. */
  readonly dominatedBy: string | null;
}

/**
 * Error against time: a method is on the front when none is at least as good in both and better in one (Pareto). Equal ones stand on it
 * together.
 */
export function paretoFront(points: readonly CostPoint[]): ParetoPlace[] {
  const known = points.filter((point): point is { id: string; loss: number; seconds: number } => point.loss !== null && point.seconds !== null && Number.isFinite(point.loss) && Number.isFinite(point.seconds));
  const better = (a: { loss: number; seconds: number }, b: { loss: number; seconds: number }): boolean => a.loss <= b.loss && a.seconds <= b.seconds && (a.loss < b.loss || a.seconds < b.seconds);
  const front = known.filter((point) => !known.some((other) => better(other, point))).sort((a, b) => a.seconds - b.seconds);
  return points.map(({ id }): ParetoPlace => {
    const point = known.find((candidate) => candidate.id === id);
    if (!point) return { id, onFront: null, dominatedBy: null };
    if (front.includes(point)) return { id, onFront: true, dominatedBy: null };
    return { id, onFront: false, dominatedBy: front.find((other) => better(other, point))?.id ?? null };
  });
}
