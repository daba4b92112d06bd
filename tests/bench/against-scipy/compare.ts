import type { PeerAnswer, PeerProcess } from './peer-process';

/** One row of the table: both medians, and their ratio beside the largest that is aimed at. */
export interface Comparison {
  readonly name: string;
  readonly size: string;
  /** Milliseconds. */
  readonly ours: number;
  readonly peer: number | null;
  /** Largest ratio aimed at; null where the row is for information. */
  readonly aim: number | null;
}

export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : 0.5 * (sorted[middle - 1] + sorted[middle]);
};

export interface TimedStage {
  /** Timed on our side, by name; the names are those of the peer's stage. */
  readonly ours: Readonly<Record<string, () => unknown>>;
  readonly stage: string;
  readonly options?: Readonly<Record<string, number>>;
  /** Repetitions a round, after one call that warms up. */
  readonly repetitions: number;
}

export interface StageTimes {
  readonly ours: Readonly<Record<string, number>>;
  readonly peer: Readonly<Record<string, number>> | null;
  readonly figures: PeerAnswer['figures'];
}

/** Rounds in which the two sides take turns, so that a slow spell of the machine falls on both. */
const rounds = 3;

/** Median milliseconds of both sides. */
export async function timeStage(peer: PeerProcess | null, stage: TimedStage): Promise<StageTimes> {
  const names = Object.keys(stage.ours);
  const ours: Record<string, number[]> = Object.fromEntries(names.map((name) => [name, []]));
  const theirs: Record<string, number[]> = {};
  let figures: PeerAnswer['figures'] = {};
  for (let round = 0; round < rounds; round++) {
    for (const name of names) {
      if (round === 0) stage.ours[name]();
      for (let k = 0; k < stage.repetitions; k++) {
        const start = performance.now();
        stage.ours[name]();
        ours[name].push(performance.now() - start);
      }
    }
    if (!peer) continue;
    const answer = await peer.ask(stage.stage, { repetitions: stage.repetitions, ...stage.options });
    figures = answer.figures;
    for (const [name, seconds] of Object.entries(answer.seconds)) (theirs[name] ??= []).push(...seconds.map((s) => 1000 * s));
  }
  const medians = (all: Record<string, number[]>): Record<string, number> => Object.fromEntries(Object.entries(all).map(([name, values]) => [name, median(values)]));
  return { ours: medians(ours), peer: peer ? medians(theirs) : null, figures };
}

/** Both sides must have computed the same thing. */
export function requireClose(what: string, ours: number, peer: number | undefined, tolerance: number): void {
  if (peer !== undefined && !(Math.abs(ours - peer) <= tolerance * Math.max(Math.abs(ours), Math.abs(peer))))
    throw new Error(`${what}: ${ours} here, ${peer} in the peer.`);
}
