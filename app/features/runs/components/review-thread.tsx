import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { RunDetail } from '../../../../shared/contracts/runs';
import { Button } from '../../../components/ui/button';
import { Checkbox, Textarea } from '../../../components/ui/field';
import { ErrorPanel } from '../../../components/ui/notices';
import { Tag } from '../../../components/ui/layout';
import { formatShortDate } from '../../../lib/format';
import { listCommentsQueryOptions, useCreateComment } from '../api/run-actions';

const time = (iso: string): string => `${formatShortDate(iso)}, ${new Date(iso).toTimeString().slice(0, 5)}`;

/** Notes on a run, each tied to what it is about. */
export function ReviewThread({ run, anchor, onAnchor }: { run: RunDetail; anchor: string; onAnchor: (anchor: string) => void }) {
  const comments = useQuery(listCommentsQueryOptions(run.id));
  const create = useCreateComment(run.id);
  const [text, setText] = useState('');
  const [question, setQuestion] = useState(false);
  const send = () =>
    create.mutate({ text: text.trim(), anchor, question }, { onSuccess: () => { setText(''); setQuestion(false); onAnchor(''); } });
  return (
    <div className="sheet thread">
      {comments.isError ? <ErrorPanel error={comments.error} what="Notes" onRetry={() => void comments.refetch()} /> : null}
      {run.verdicts.map((v) => (
        <div className="msg" key={`${v.at}-${v.by.handle}`}>
          <div><b>{v.by.handle}</b><span>{time(v.at)}</span></div>
          <div><Tag>{v.verdict.replaceAll('-', ' ')}</Tag><p>{v.reason}</p></div>
        </div>
      ))}
      {comments.data?.map((c) => (
        <div className="msg" key={c.id}>
          <div><b>{c.by.handle}</b><span>{time(c.at)}</span></div>
          <div>
            {c.anchor ? <span className="anc">{c.anchor}</span> : null}
            {c.question ? <Tag>{c.answered ? 'question, answered' : 'open question'}</Tag> : null}
            <p>{c.text}</p>
          </div>
        </div>
      ))}
      {comments.data?.length === 0 && run.verdicts.length === 0 ? <p className="sm" style={{ padding: '12px 0' }}>No notes yet.</p> : null}
      {run.may.comment ? (
        <form className="thread-new" onSubmit={(event) => { event.preventDefault(); if (text.trim()) send(); }}>
          {anchor ? <p className="sm">On {anchor} <button type="button" className="lnk" onClick={() => onAnchor('')}>remove</button></p> : null}
          <Textarea label="Add a note" rows={2} value={text} onChange={(event) => setText(event.target.value)} placeholder="Select a cell of the table to attach the note to it" error={create.isError ? create.error.message : undefined} />
          <div className="flex gap-x4 items-center flex-wrap" style={{ marginTop: 8 }}>
            <Button type="submit" disabled={create.isPending || !text.trim()}>Send note</Button>
            <Checkbox checked={question} onChange={(event) => setQuestion(event.target.checked)}>It asks a question</Checkbox>
          </div>
        </form>
      ) : <p className="sm" style={{ padding: '12px 0' }}>Sign in to add a note.</p>}
    </div>
  );
}
