import type { ReactNode } from 'react';

/** A quiet select inside a line of text (`.rb`). */
export function InlineSelect({ label, value, onChange, children, className = 'rb' }: { label: string; value: string; onChange: (value: string) => void; children: ReactNode; className?: string }) {
  return (
    <select className={className} aria-label={label} value={value} onChange={(e) => onChange(e.target.value)}>
      {children}
    </select>
  );
}
