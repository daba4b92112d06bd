import 'katex/dist/katex.min.css';
import katex from 'katex';
import { useMemo } from 'react';

/** `tex` comes from our own reference texts; KaTeX escapes what it does not know (trust: false). */
export default function FormulaRendered({ tex, inline, label }: { tex: string; inline: boolean; label?: string }) {
  const html = useMemo(() => katex.renderToString(tex, { displayMode: !inline, throwOnError: false, strict: 'ignore' }), [tex, inline]);
  return <span className="formula" role="math" aria-label={label ?? tex} dangerouslySetInnerHTML={{ __html: html }} />;
}
