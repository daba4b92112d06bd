interface Column {
  key: string;
  name: string;
}

/** Which columns a table shows; the fixed ones are not offered. */
export function ColumnChooser({ columns, shown, onChange, label = 'Columns' }: { columns: readonly Column[]; shown: ReadonlySet<string>; onChange: (shown: Set<string>) => void; label?: string }) {
  return (
    <details className="colpick" onKeyDown={(e) => { if (e.key === 'Escape') e.currentTarget.open = false; }}>
      <summary>{label}</summary>
      <div role="group" aria-label={label}>
        {columns.map((c) => (
          <label key={c.key}>
            <input
              type="checkbox"
              checked={shown.has(c.key)}
              onChange={(e) => {
                const next = new Set(shown);
                if (e.target.checked) next.add(c.key);
                else next.delete(c.key);
                onChange(next);
              }}
            />
            {c.name}
          </label>
        ))}
      </div>
    </details>
  );
}
