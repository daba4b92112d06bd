import { Link } from 'react-router-dom';
import { formatShortDate } from '../../../lib/format';
import type { Waiting, WaitingItem } from '../model/waiting';

/** Three columns: you, a developer, reviewers; each item since when, and one action. */
export function WaitingPanel({ waiting }: { waiting: Waiting }) {
  return (
    <>
      <h2 className="vh">What waits for whom</h2>
      <section id="waiting" className="sheet wf" aria-label="What waits for whom">
        <Column title="Waits for you" items={waiting.you} />
        <Column title="Waits for a developer" items={waiting.developer} />
        <Column title="Waits for reviewers" items={waiting.reviewers} />
      </section>
    </>
  );
}

function Column({ title, items }: { title: string; items: readonly WaitingItem[] }) {
  return (
    <div>
      <h3>{title} <span>{items.length}</span></h3>
      {items.slice(0, 6).map((item) => (
        <div className="wi" key={item.key}>
          <b>{item.title}</b>
          <p>{item.line}</p>
          <div className="ft"><span>since {formatShortDate(item.since)}</span><Link to={item.to}>{item.action}</Link></div>
        </div>
      ))}
      {items.length > 6 ? <p className="wi sm">and {items.length - 6} more</p> : null}
      {items.length === 0 ? <p className="wi sm">Nothing.</p> : null}
    </div>
  );
}
