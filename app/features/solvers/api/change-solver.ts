import { useMutation, useQueryClient } from '@tanstack/react-query';
import { benchDetailSchema, type BenchDetail } from '../../../../shared/contracts/benches';
import { solverDetailSchema, type SolverCreate, type SolverDetail } from '../../../../shared/contracts/solvers';
import { api } from '../../../lib/api-client';
import { solverKeys } from './keys';

const e = encodeURIComponent;

export type SolverTarget = { readonly mode: 'new'; readonly group: string; readonly name: string; readonly description: string } | { readonly mode: 'next'; readonly slug: string; readonly whatChanged: string };
export interface SubmitSolver {
  readonly target: SolverTarget;
  readonly configuration: SolverCreate['configuration'];
  readonly declaration: SolverCreate['declaration'];
  /** The bench to enter; null registers only, and `register` false keeps a draft. */
  readonly bench: string | null;
  readonly register: boolean;
  /** Stored by an attempt before whose entry was refused. */
  readonly stored: SolverDetail | null;
}

const enter = (bench: string, solver: string, version: number): Promise<BenchDetail> => api.post(`/benches/${e(bench)}/entries`, benchDetailSchema, { json: { solver, version } });
const newest = (solver: SolverDetail): number => Math.max(...solver.versions.map((v) => v.n));

async function store({ target, configuration, declaration, register }: SubmitSolver): Promise<SolverDetail> {
  if (target.mode === 'next') return api.post(`/solvers/${e(target.slug)}/versions`, solverDetailSchema, { json: { configuration, declaration, whatChanged: target.whatChanged, register } });
  return api.post('/solvers', solverDetailSchema, { json: { group: target.group, name: target.name, description: target.description, configuration, declaration, register } });
}

export interface Submitted {
  readonly solver: SolverDetail;
  /** First run of the new entry. */
  readonly run: string | null;
}

/** Registers the version, then enters it; `stored` hears of the version before it is entered, so that nothing is stored twice. */
export function useSubmitSolver(onStored: (solver: SolverDetail) => void) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: async (input: SubmitSolver): Promise<Submitted> => {
      const solver = input.stored ?? (await store(input));
      onStored(solver);
      if (!input.bench || !input.register) return { solver, run: null };
      const version = newest(solver);
      const bench = await enter(input.bench, solver.slug, version);
      const entry = bench.entries.find((item) => item.solver.slug === solver.slug && item.solver.version === version);
      return { solver, run: entry?.runs[0]?.run ?? null };
    },
    onSettled: () => Promise.all([client.invalidateQueries({ queryKey: solverKeys.all }), client.invalidateQueries({ queryKey: ['benches'] })]),
  });
}

function useSolverChange<V>(send: (values: V) => Promise<unknown>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: send,
    onSuccess: () => Promise.all([client.invalidateQueries({ queryKey: solverKeys.all }), client.invalidateQueries({ queryKey: ['benches'] })]),
  });
}
export const useWithdrawSolver = (slug: string, n: number) => useSolverChange<{ reason: string }>((json) => api.post(`/solvers/${e(slug)}/versions/${n}/withdraw`, solverDetailSchema, { json }));
export const useRegisterSolver = (slug: string, n: number) => useSolverChange<void>(() => api.post(`/solvers/${e(slug)}/versions/${n}/register`, solverDetailSchema));
export const useEnterBench = (slug: string, n: number) => useSolverChange<string>((bench) => enter(bench, slug, n));
