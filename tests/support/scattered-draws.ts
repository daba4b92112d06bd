import { defaultLadder } from '../../shared/domain/ladder';
import { deriveKey, RandomStream } from '../../solvers/core/random';

/** Draws about a law at each level of the default ladder, log-normal scatter. */
export function scattered(law: (level: number) => number, scatter: number, name: string, draws = 24): number[][] {
  const stream = new RandomStream(deriveKey('test', name));
  return defaultLadder.map((level) => Array.from({ length: draws }, () => law(level) * Math.exp(scatter * stream.nextNormal())));
}
