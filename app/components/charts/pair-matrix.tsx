import { useState, type KeyboardEvent } from 'react';
import { SolverGlyph } from '../ui/solver-glyph';

export interface MatrixItem {
  id: string;
  glyph: number;
  name: string;
}
export interface MatrixCell {
  /** Printed in the cell. */
  text: string;
  /** 0 to 1: how far the row is ahead; shades the cell. */
  ahead: number;
  /** A test separates the two. */
  separable: boolean;
  /** Everything known of the pair, in a sentence. */
  words: string;
}

/**
 * Pairs as a grid, row against column. One cell is in the tab order, arrow keys move to the others, and the sentence of the chosen one
 * stands under the grid.
 */
export function PairMatrix({ caption, items, cellOf, hint }: { caption: string; items: readonly MatrixItem[]; cellOf: (row: number, column: number) => MatrixCell | null; hint: string }) {
  const [chosen, setChosen] = useState<readonly [number, number] | null>(null);
  const n = items.length;
  const at = chosen && chosen[0] < n && chosen[1] < n ? chosen : null;
  const entry = at ?? [0, Math.min(1, n - 1)];
  const words = at ? cellOf(at[0], at[1])?.words ?? hint : hint;
  const onKeyDown = (event: KeyboardEvent<HTMLTableElement>) => {
    const step = { ArrowRight: [0, 1], ArrowLeft: [0, -1], ArrowDown: [1, 0], ArrowUp: [-1, 0] }[event.key];
    if (!step) return;
    event.preventDefault();
    let [i, j] = entry as [number, number];
    do {
      i += step[0]!;
      j += step[1]!;
    } while (i >= 0 && j >= 0 && i < n && j < n && i === j);
    if (i < 0 || j < 0 || i >= n || j >= n) return;
    setChosen([i, j]);
    event.currentTarget.querySelector<HTMLButtonElement>(`[data-cell="${i}-${j}"]`)?.focus();
  };
  return (
    <>
      <div className="scrollx" role="region" aria-label={caption} tabIndex={-1}>
        <table className="pw pm" onKeyDown={onKeyDown}>
          <caption className="vh">{caption}. {hint}</caption>
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
                  const cell = i === j ? null : cellOf(i, j);
                  if (!cell) return <td key={column.id} style={{ color: 'var(--ink-3)' }}>{'–'}</td>;
                  const on = at?.[0] === i && at[1] === j;
                  return (
                    <td key={column.id} style={{ background: `rgba(var(--heat), ${(cell.ahead * 0.4).toFixed(2)})` }}>
                      <button type="button" data-cell={`${i}-${j}`} aria-pressed={on} tabIndex={i === entry[0] && j === entry[1] ? 0 : -1} className={cell.separable ? 'sep' : undefined} onClick={() => setChosen([i, j])} title={cell.words}>
                        {cell.text}<span className="vh">{cell.separable ? ', separable' : ', not separable'}</span>
                      </button>
                    </td>
                  );
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="sm pm-words" aria-live="polite">{words}</p>
    </>
  );
}
