import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { progressSchema, type Progress } from '../../../../shared/contracts/runs';
import { apiUrl } from '../../../lib/api-client';
import { runKeys } from './keys';

const settled = (state: Progress['state']): boolean => state === 'finished' || state === 'failed' || state === 'cancelled';

/**
 * Progress as the server tells it, from its first event (the state at the moment of asking) to the last. The stream opens
 * again by itself after a lost connection or a reload.
 */
export function useRunProgress(id: string, initial: Progress): Progress {
  const client = useQueryClient();
  const [latest, setLatest] = useState<{ id: string; progress: Progress } | null>(null);
  const progress = latest?.id === id && !settled(initial.state) ? latest.progress : initial;
  const over = settled(initial.state);
  useEffect(() => {
    if (over || typeof EventSource === 'undefined') return;
    const source = new EventSource(apiUrl(`/runs/${encodeURIComponent(id)}/events`));
    source.addEventListener('progress', (event: MessageEvent<string>) => {
      const parsed = progressSchema.safeParse(JSON.parse(event.data));
      if (!parsed.success) return;
      setLatest({ id, progress: parsed.data });
      if (!settled(parsed.data.state)) return;
      source.close();
      void client.invalidateQueries({ queryKey: runKeys.all });
      void client.invalidateQueries({ queryKey: ['benches'] });
    });
    return () => source.close();
  }, [id, over, client]);
  return progress;
}
