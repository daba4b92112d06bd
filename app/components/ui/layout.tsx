import clsx from 'clsx';
import type { ReactNode } from 'react';

/** Crumbs, the question as h1, and at the right the page's actions or pictures. */
export function PageHead({ crumbs, title, lead, children }: { crumbs?: ReactNode; title: ReactNode; lead?: ReactNode; children?: ReactNode }) {
  return (
    <div className="head">
      <div>
        {crumbs ? <div className="crumb">{crumbs}</div> : null}
        <h1>{title}</h1>
        {lead ? <p className="lead" style={{ marginTop: 5, maxWidth: '72ch' }}>{lead}</p> : null}
      </div>
      {children ? <div className="flex gap-x2 items-center flex-wrap">{children}</div> : null}
    </div>
  );
}

/** A section of a page: title left, one line right. */
export function Section({ title, note, className, id, children }: { title: ReactNode; note?: ReactNode; className?: string; id?: string; children: ReactNode }) {
  return (
    <section className={clsx('sec', className)} id={id}>
      <header>
        <h2>{title}</h2>
        {note ? <p>{note}</p> : null}
      </header>
      {children}
    </section>
  );
}

/** A numbered or named part of a form: ink rule, title left, one-line fact right. */
export function FormSection({ title, fact, className, id, children }: { title: ReactNode; fact?: ReactNode; className?: string; id?: string; children: ReactNode }) {
  return (
    <section className={clsx('fs', className)} id={id}>
      <header>
        <h2>{title}</h2>
        {fact ? <p>{fact}</p> : null}
      </header>
      {children}
    </section>
  );
}

/** Name and value, two columns. */
export function FactList({ facts, className }: { facts: readonly (readonly [name: ReactNode, value: ReactNode])[]; className?: string }) {
  return (
    <dl className={clsx('facts', className)}>
      {facts.map(([name, value], i) => (
        <div key={i}><dt>{name}</dt><dd>{value}</dd></div>
      ))}
    </dl>
  );
}

export function Tag({ children }: { children: ReactNode }) {
  return <span className="tag">{children}</span>;
}

/** On phones the bar at the bottom with the page's one action; hidden on wide screens. */
export function Dock({ children }: { children: ReactNode }) {
  return <div className="dock only-m">{children}</div>;
}
