import { Children, isValidElement, type ComponentProps, type ReactNode } from 'react';
import ReactMarkdown from 'react-markdown';
import rehypeSanitize from 'rehype-sanitize';
import remarkMath from 'remark-math';
import FormulaRendered from './formula-rendered';

const textOf = (children: ReactNode): string => Children.toArray(children).filter((c) => typeof c === 'string').join('').trim();

const isMath = (className: string | undefined): boolean => className?.split(' ').includes('language-math') ?? false;

function Code({ className, children }: ComponentProps<'code'>) {
  return isMath(className) ? <FormulaRendered tex={textOf(children)} inline /> : <code className={className}>{children}</code>;
}

/** A displayed formula arrives as code inside pre; the pre goes, so that the formula is not set as a listing. */
function Pre({ children }: ComponentProps<'pre'>) {
  const only = Children.toArray(children)[0];
  if (isValidElement<ComponentProps<'code'>>(only) && isMath(only.props.className)) return <div><FormulaRendered tex={textOf(only.props.children)} inline={false} /></div>;
  return <pre>{children}</pre>;
}

/** A page has one h1; headings written by people start at h3. */
const components = { h1: 'h3', h2: 'h3', h3: 'h4', h4: 'h4', code: Code, pre: Pre } as const;

// The default allow-list of rehype-sanitize: no style, no raw HTML; of a formula it leaves the class language-math and the text.
// KaTeX draws it afterwards (trust: false). It is the one KaTeX of this project: what another version draws does not match its
// style sheet and loses its subscripts.
export default function MarkdownRendered({ source }: { source: string }) {
  return (
    <ReactMarkdown remarkPlugins={[remarkMath]} rehypePlugins={[rehypeSanitize]} components={components}>
      {source}
    </ReactMarkdown>
  );
}
