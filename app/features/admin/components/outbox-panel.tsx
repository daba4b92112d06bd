import { Box } from '../../../components/ui/box';
import { Button } from '../../../components/ui/button';
import { Tag } from '../../../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../../../components/ui/notices';
import { formatDateTime } from '../../../lib/format';
import { useOutbox } from '../api/admin';

/** What the site wrote to people. Without an SMTP server the messages stay here, whole. */
export function OutboxPanel() {
  const outbox = useOutbox();
  const rows = outbox.data?.pages.flatMap((page) => page.items) ?? [];
  const delivers = outbox.data?.pages[0]?.delivers;
  return (
    <>
      {delivers === false ? <Box tone="caution" title="No SMTP server is set" className="mb-x4"><p>Messages are written and stay in this outbox. Set SMTP_URL to deliver them.</p></Box> : null}
      {outbox.isPending ? <Loading label="Reading the outbox" /> : null}
      {outbox.isError ? <ErrorPanel error={outbox.error} what="The outbox" onRetry={() => void outbox.refetch()} /> : null}
      {outbox.data && rows.length === 0 ? <Empty title="Nothing was written yet">A verdict, a note or the end of a run writes a message.</Empty> : null}
      {rows.length ? (
        <div className="sheet">
          {rows.map((message) => (
            <details className="mail" key={message.id}>
              <summary><span>{formatDateTime(message.createdAt)}</span><span className="only-d">{message.recipient}</span><b>{message.subject}</b><Tag>{message.state}</Tag></summary>
              <pre>{message.text || 'Delivered; the text is not kept.'}{message.failure ? `\n\nLast failure: ${message.failure}` : ''}</pre>
            </details>
          ))}
        </div>
      ) : null}
      {outbox.hasNextPage ? <Button style={{ marginTop: 12 }} onClick={() => void outbox.fetchNextPage()}>Older messages</Button> : null}
    </>
  );
}
