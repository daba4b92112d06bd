import { useRef, type KeyboardEvent, type ReactNode } from 'react';

interface Choice<V extends string> {
  value: V;
  label: ReactNode;
}

/** Two to four views of one thing (`.seg`). Not for navigation. */
export function Segmented<V extends string>({ label, value, choices, onChange, className }: { label: string; value: V; choices: readonly Choice<V>[]; onChange: (value: V) => void; className?: string }) {
  return (
    <div className={className ? `seg ${className}` : 'seg'} role="group" aria-label={label}>
      {choices.map((c) => (
        <button key={c.value} type="button" aria-pressed={c.value === value} onClick={() => onChange(c.value)}>{c.label}</button>
      ))}
    </div>
  );
}

interface TabChoice<V extends string> extends Choice<V> {
  count?: number;
}

/** Tabs with arrow keys; pair with `TabPanel` of the same `id` and value. */
export function Tabs<V extends string>({ id, label, value, tabs, onChange }: { id: string; label: string; value: V; tabs: readonly TabChoice<V>[]; onChange: (value: V) => void }) {
  const list = useRef<HTMLDivElement>(null);
  const onKeyDown = (e: KeyboardEvent) => {
    const at = tabs.findIndex((t) => t.value === value);
    const next = { ArrowRight: at + 1, ArrowLeft: at - 1, Home: 0, End: tabs.length - 1 }[e.key];
    if (next === undefined) return;
    e.preventDefault();
    const target = tabs[(next + tabs.length) % tabs.length];
    if (!target) return;
    onChange(target.value);
    list.current?.querySelector<HTMLButtonElement>(`#${CSS.escape(`${id}-${target.value}`)}`)?.focus();
  };
  return (
    <div className="tabs" role="tablist" aria-label={label} ref={list} onKeyDown={onKeyDown}>
      {tabs.map((t) => (
        <button key={t.value} type="button" role="tab" id={`${id}-${t.value}`} aria-controls={`${id}-${t.value}-panel`} aria-selected={t.value === value} tabIndex={t.value === value ? 0 : -1} onClick={() => onChange(t.value)}>
          {t.label}
          {t.count === undefined ? null : <b>{t.count}</b>}
        </button>
      ))}
    </div>
  );
}

export function TabPanel({ id, value, children }: { id: string; value: string; children: ReactNode }) {
  return <div role="tabpanel" id={`${id}-${value}-panel`} aria-labelledby={`${id}-${value}`} tabIndex={0}>{children}</div>;
}
