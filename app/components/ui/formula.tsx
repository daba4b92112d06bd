import { lazy, Suspense } from 'react';

const Rendered = lazy(() => import('./formula-rendered'));

/** One LaTeX formula, displayed by default. */
export function Formula({ tex, inline = false, label }: { tex: string; inline?: boolean; label?: string }) {
  return (
    <Suspense fallback={<code className="mono">{tex}</code>}>
      <Rendered tex={tex} inline={inline} label={label} />
    </Suspense>
  );
}
