import 'katex/dist/katex.min.css';
import ReactMarkdown from 'react-markdown';
import rehypeKatex from 'rehype-katex';
import rehypeSanitize, { defaultSchema } from 'rehype-sanitize';
import remarkMath from 'remark-math';

/** The default allow-list, plus the class names by which remark-math hands formulas to KaTeX. No style, no raw HTML. */
const schema = {
  ...defaultSchema,
  attributes: {
    ...defaultSchema.attributes,
    code: [...(defaultSchema.attributes?.code ?? []), ['className', /^language-./, 'math-inline', 'math-display']],
  },
} satisfies typeof defaultSchema;

/** A page has one h1; headings written by people start at h3. */
const components = { h1: 'h3', h2: 'h3', h3: 'h4', h4: 'h4' } as const;

// Sanitising comes before KaTeX: what people wrote is cleaned, what KaTeX draws is trusted (trust: false by default).
export default function MarkdownRendered({ source }: { source: string }) {
  return (
    <ReactMarkdown remarkPlugins={[remarkMath]} rehypePlugins={[[rehypeSanitize, schema], [rehypeKatex, { throwOnError: false, strict: 'ignore' }]]} components={components}>
      {source}
    </ReactMarkdown>
  );
}
