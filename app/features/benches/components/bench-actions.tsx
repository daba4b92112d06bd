import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { benchDetailSchema, type BenchDetail } from '../../../../shared/contracts/benches';
import { Button, ButtonLink } from '../../../components/ui/button';
import { Confirm } from '../../../components/ui/dialog';
import { ErrorPanel } from '../../../components/ui/notices';
import { StateMark } from '../../../components/ui/state-mark';
import { useToast } from '../../../components/ui/toast';
import { api } from '../../../lib/api-client';
import { plural } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { benchKeys } from '../api/keys';

type Move = 'open' | 'close';

/** What a curator or owner may do, and how far the runs are. Nothing is shown where neither applies. */
export function BenchActions({ bench }: { bench: BenchDetail }) {
  const [asked, setAsked] = useState<Move | null>(null);
  const client = useQueryClient();
  const toast = useToast();
  const move = useMutation({
    mutationFn: (to: Move) => api.post(`/benches/${encodeURIComponent(bench.slug)}/${to}`, benchDetailSchema),
    onSuccess: async (answer, to) => {
      client.setQueryData(benchKeys.detail(bench.slug), answer);
      setAsked(null);
      await client.invalidateQueries({ queryKey: benchKeys.all });
      toast(to === 'open' ? 'Bench opened.' : 'Bench closed.');
    },
  });
  const running = bench.runsFinished < bench.runsTotal;
  if (!running && !bench.may.open && !bench.may.close && !bench.may.enter) return null;
  return (
    <div className={running ? 'sheet pad bact' : 'bact'}>
      {running ? <><StateMark state="running" word={`${bench.runsFinished} of ${plural(bench.runsTotal, 'run')} finished`} /><span className="sm">The ranking counts what is finished.</span></> : null}
      {bench.may.enter ? <ButtonLink to={`${paths.solverNew()}?bench=${bench.slug}`}>Enter a solver</ButtonLink> : null}
      {bench.may.open ? <Button look="primary" onClick={() => setAsked('open')}>Open bench</Button> : null}
      {bench.may.close ? <Button onClick={() => setAsked('close')}>Close bench</Button> : null}
      <Confirm
        open={asked !== null} pending={move.isPending} onClose={() => setAsked(null)} onConfirm={() => asked && move.mutate(asked)}
        title={asked === 'open' ? `Open ${bench.title}?` : `Close ${bench.title}?`}
        confirmLabel={asked === 'open' ? 'Open bench' : 'Close bench'} keepLabel={asked === 'open' ? 'Keep the draft' : 'Keep it open'}
      >
        <p>{asked === 'open' ? 'From then on its phantoms, ladder, draws, seed and metric never change, and developers can enter solvers.' : 'No more entries. The bench is frozen, its hash covers the results, and it can be cited. This cannot be undone.'}</p>
        {move.isError ? <ErrorPanel error={move.error} /> : null}
      </Confirm>
    </div>
  );
}
