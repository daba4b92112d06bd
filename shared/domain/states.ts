/** States and the moves between them. Nothing that was ranked is edited or deleted. */
export const phantomStates = ['draft', 'submitted', 'changes-requested', 'published', 'withdrawn'] as const;
export type PhantomState = (typeof phantomStates)[number];
export const solverStates = ['draft', 'registered', 'withdrawn'] as const;
export type SolverState = (typeof solverStates)[number];
export const benchStates = ['draft', 'open', 'closed'] as const;
export type BenchState = (typeof benchStates)[number];
export const runStates = ['queued', 'running', 'finished', 'failed', 'cancelled'] as const;
export type RunState = (typeof runStates)[number];
export const reviewStates = ['unreviewed', 'in-review', 'signed-off', 'signed-off-with-reservation', 'returned', 'declined'] as const;
export type ReviewState = (typeof reviewStates)[number];
export const verdicts = ['signed-off', 'signed-off-with-reservation', 'returned', 'declined'] as const;
export type Verdict = (typeof verdicts)[number];

const phantomMoves: Record<PhantomState, readonly PhantomState[]> = {
  draft: ['submitted', 'withdrawn'],
  submitted: ['published', 'changes-requested', 'withdrawn'],
  'changes-requested': ['draft', 'submitted', 'withdrawn'],
  published: ['withdrawn'],
  withdrawn: [],
};
const solverMoves: Record<SolverState, readonly SolverState[]> = { draft: ['registered', 'withdrawn'], registered: ['withdrawn'], withdrawn: [] };
const benchMoves: Record<BenchState, readonly BenchState[]> = { draft: ['open'], open: ['closed'], closed: [] };
const runMoves: Record<RunState, readonly RunState[]> = {
  queued: ['running', 'cancelled', 'failed'], running: ['queued', 'finished', 'failed', 'cancelled'], finished: [], failed: ['queued'], cancelled: ['queued'],
};
const reviewMoves: Record<ReviewState, readonly ReviewState[]> = {
  unreviewed: ['in-review', ...verdicts], 'in-review': ['unreviewed', ...verdicts],
  'signed-off': [], 'signed-off-with-reservation': [], returned: [], declined: [],
};

export const mayMove = {
  phantom: (from: PhantomState, to: PhantomState): boolean => phantomMoves[from].includes(to),
  solver: (from: SolverState, to: SolverState): boolean => solverMoves[from].includes(to),
  bench: (from: BenchState, to: BenchState): boolean => benchMoves[from].includes(to),
  run: (from: RunState, to: RunState): boolean => runMoves[from].includes(to),
  review: (from: ReviewState, to: ReviewState): boolean => reviewMoves[from].includes(to),
};
