import { lazy, Suspense } from 'react';

const Rendered = lazy(() => import('./markdown-rendered'));

/**
 * Markdown with LaTeX formulas ($...$, $$...$$), sanitised. The renderer and KaTeX's style are loaded where it is used;
 * until then the source is shown as text.
 */
export function Markdown({ source, className }: { source: string; className?: string }) {
  const css = className ? `md ${className}` : 'md';
  return (
    <Suspense fallback={<div className={css}><p style={{ whiteSpace: 'pre-wrap' }}>{source}</p></div>}>
      <div className={css}><Rendered source={source} /></div>
    </Suspense>
  );
}
