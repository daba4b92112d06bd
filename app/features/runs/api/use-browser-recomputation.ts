import { useRef, useState } from 'react';
import { replaySchema } from '../../../../shared/contracts/runs';
import { api } from '../../../lib/api-client';
import { reconstructionClient } from '../../../workers/reconstruction-client';

interface BrowserRecomputation {
  state: 'idle' | 'running' | 'finished' | 'failed';
  done: number;
  total: number;
  hash: string | null;
  equal: boolean;
  firstDifference: { level: number; draw: number } | null;
  error: string | null;
}
const idle: BrowserRecomputation = { state: 'idle', done: 0, total: 0, hash: null, equal: false, firstDifference: null, error: null };

/** Replays a finished run in a worker of this browser, draw by draw, and compares every hash with the stored one. */
export function useBrowserRecomputation(id: string): BrowserRecomputation & { start: () => void; stop: () => void } {
  const [state, setState] = useState(idle);
  const abort = useRef<AbortController | null>(null);
  const start = () => {
    abort.current?.abort();
    const controller = new AbortController();
    abort.current = controller;
    const { signal } = controller;
    setState({ ...idle, state: 'running' });
    const work = async () => {
      const replay = await api.get(`/runs/${encodeURIComponent(id)}/replay`, replaySchema, { signal });
      setState((old) => ({ ...old, total: replay.ladder.length * replay.draws }));
      const answer = await reconstructionClient().recompute(replay, { signal, onProgress: ({ done, total }) => setState((old) => ({ ...old, done, total })) });
      setState((old) => ({ ...old, state: 'finished', hash: answer.resultHash, equal: answer.resultHash === replay.resultHash && answer.firstDifference === null, firstDifference: answer.firstDifference }));
    };
    work().catch((error: unknown) => {
      if (signal.aborted) setState(idle);
      else setState((old) => ({ ...old, state: 'failed', error: error instanceof Error ? error.message : String(error) }));
    });
  };
  return { ...state, start, stop: () => abort.current?.abort() };
}
