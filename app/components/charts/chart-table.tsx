import type { ReactNode } from 'react';

export interface ChartTableData {
  caption: string;
  columns: readonly ReactNode[];
  rows: readonly (readonly ReactNode[])[];
}

/** The figures behind a chart: in a disclosure, or for screen readers only where they stand on the page anyway. */
export function ChartTable({ data, hidden = false }: { data: ChartTableData; hidden?: boolean }) {
  const table = (
    <table>
      <caption className="vh">{data.caption}</caption>
      <thead><tr>{data.columns.map((c, i) => <th key={i} scope="col" className={i ? 'num' : undefined}>{c}</th>)}</tr></thead>
      <tbody>
        {data.rows.map((row, i) => (
          <tr key={i}>{row.map((cell, j) => (j === 0 ? <th key={j} scope="row">{cell}</th> : <td key={j} className="num">{cell}</td>))}</tr>
        ))}
      </tbody>
    </table>
  );
  if (hidden) return <div className="vh">{table}</div>;
  return (
    <details className="ctable">
      <summary>Figures of this chart</summary>
      <div tabIndex={0} role="region" aria-label={data.caption}>{table}</div>
    </details>
  );
}
