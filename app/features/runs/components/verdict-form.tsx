import { useState } from 'react';
import type { RunDetail } from '../../../../shared/contracts/runs';
import type { Verdict } from '../../../../shared/domain/states';
import { Button } from '../../../components/ui/button';
import { Option, Textarea } from '../../../components/ui/field';
import { Box } from '../../../components/ui/box';
import { useToast } from '../../../components/ui/toast';
import { isApiError } from '../../../lib/api-client';
import { useCreateVerdict, useTakeReview, type VerdictInput } from '../api/run-actions';

export const inspectedParts = { table: 'Error table', images: 'Images', checks: 'Checks', provenance: 'Provenance' } as const;
export type InspectedPart = keyof typeof inspectedParts;

const choices: { verdict: Verdict; name: string; consequence: string; asks: string }[] = [
  { verdict: 'signed-off', name: 'Signed off', consequence: 'The table is correct and may be cited.', asks: 'Reason' },
  { verdict: 'signed-off-with-reservation', name: 'Signed off with a reservation', consequence: 'Correct; the note below is shown beside every figure.', asks: 'Reservation, shown beside every figure' },
  { verdict: 'returned', name: 'Returned', consequence: 'To be rerun or explained; a new version follows.', asks: 'What to rerun or explain' },
  { verdict: 'declined', name: 'Declined', consequence: 'Breaks a rule of the bench; leaves its ranking.', asks: 'Which rule it breaks' },
];

/** A reviewer's word. Recording waits until every part was inspected and a reason is written; what is missing stands beside it. */
export function VerdictForm({ run, inspected, onInspect, me }: { run: RunDetail; inspected: ReadonlySet<InspectedPart>; onInspect: (part: InspectedPart, seen: boolean) => void; me: string }) {
  const [verdict, setVerdict] = useState<Verdict>('signed-off');
  const [reason, setReason] = useState('');
  const create = useCreateVerdict(run.id);
  const take = useTakeReview(run.id);
  const toast = useToast();
  const choice = choices.find((c) => c.verdict === verdict)!;
  const left = (Object.keys(inspectedParts) as InspectedPart[]).filter((part) => !inspected.has(part));
  const missing = left.length ? `Inspect ${left.map((part) => inspectedParts[part].toLowerCase()).join(', ')} first.` : reason.trim().length < 10 ? 'Write at least 10 characters of reason.' : null;
  const reviewing = run.reviewer?.handle === me;
  const record = () => {
    const input: VerdictInput = { verdict, reason: reason.trim(), inspected: [...inspected] };
    // This form is gone once the run is read again, and callbacks of `mutate` go with it; the promise stays.
    create.mutateAsync(input).then(() => toast(`Verdict recorded: ${choice.name.toLowerCase()}.`), () => undefined);
  };
  return (
    <form className="sheet" onSubmit={(event) => { event.preventDefault(); if (!missing) record(); }} aria-label="Verdict">
      <fieldset className="bare">
        <legend className="vh">Verdict</legend>
        {choices.map((c) => (
          <Option key={c.verdict} name="verdict" value={c.verdict} checked={c.verdict === verdict} onChange={() => setVerdict(c.verdict)} title={c.name}>{c.consequence}</Option>
        ))}
      </fieldset>
      <div className="vf-part"><Textarea label={choice.asks} rows={3} value={reason} onChange={(event) => setReason(event.target.value)} error={isApiError(create.error) ? create.error.issueAt('reason') : undefined} /></div>
      <fieldset className="bare vf-part">
        <legend className="lab">Inspected</legend>
        <div className="vf-inspected">
          {(Object.keys(inspectedParts) as InspectedPart[]).map((part) => (
            <label key={part}><input type="checkbox" checked={inspected.has(part)} onChange={(event) => onInspect(part, event.target.checked)} /> {inspectedParts[part]}</label>
          ))}
        </div>
      </fieldset>
      {create.isError ? <Box tone="failure" title="The verdict was not recorded" alert><p>{create.error.message}</p></Box> : null}
      <div className="vf-act">
        <Button type="submit" look="primary" disabled={!!missing || create.isPending} aria-describedby="verdict-missing">Record verdict</Button>
        <span className="sm" id="verdict-missing">{missing ?? (create.isPending ? 'Recording' : 'Recorded with your handle and the time.')}</span>
        <Button onClick={() => take.mutate(!reviewing)} disabled={take.isPending || (!!run.reviewer && !reviewing)} style={{ marginLeft: 'auto' }}>{reviewing ? 'Give it back' : 'Take this review'}</Button>
      </div>
    </form>
  );
}
