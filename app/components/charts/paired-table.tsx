import { SolverGlyph } from '../ui/solver-glyph';

export interface PairedItem {
  id: string;
  glyph: number;
  name: string;
}

/** Per cent of paired draws that the row wins against the column; shaded above 50 only. */
export function PairedTable({ items, wins, caption = 'Paired draws won, per cent, row against column' }: { items: readonly PairedItem[]; wins: readonly (readonly (number | null)[])[]; caption?: string }) {
  return (
    <div className="scrollx" tabIndex={0} role="region" aria-label={caption}>
      <table className="pw">
        <caption className="vh">{caption}</caption>
        <thead>
          <tr>
            <th className="r"><span className="vh">Solver</span></th>
            {items.map((s) => <th key={s.id} scope="col"><SolverGlyph index={s.glyph} size={15} /><span className="vh">{s.name}</span></th>)}
          </tr>
        </thead>
        <tbody>
          {items.map((row, i) => (
            <tr key={row.id}>
              <th className="r" scope="row">{row.name} <SolverGlyph index={row.glyph} size={13} /></th>
              {items.map((column, j) => {
                const share = wins[i]?.[j];
                if (i === j || share === null || share === undefined) return <td key={column.id} style={{ color: 'var(--ink-3)' }}>{'\u2013'}</td>;
                const per = share * 100;
                const away = Math.abs(per - 50);
                return (
                  <td key={column.id} style={{ background: `rgba(var(--heat), ${per > 50 ? ((away / 50) * 0.4).toFixed(2) : 0})`, color: away < 14 ? 'var(--ink-2)' : undefined, fontWeight: away < 14 ? undefined : 500 }}>{per.toFixed(0)}</td>
                );
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
