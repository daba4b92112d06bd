import type { ReactNode } from 'react';
import type { AxisSetting } from '../../../shared/domain/axes';
import { axisView } from '../../lib/axis-words';
import { AxisContext } from '../noise-rule/axis-context';
import { NoiseRuleBand, type NoiseRuleProps } from '../noise-rule/noise-rule';

interface PageProps {
  /** For the browser's title bar. */
  title: string;
  /** The noise rule's facts on pages whose figures depend on noise; without it the page carries no rule. */
  rule?: NoiseRuleProps;
  /** What the levels of the page's figures vary; the noise where absent. */
  axis?: AxisSetting;
  /** The class its own styles hang on: `page-run`. */
  className?: string;
  children: ReactNode;
}

/** Every route renders one: the rule where a figure depends on noise, then the content. */
export function Page({ title, rule, axis, className, children }: PageProps) {
  return (
    <AxisContext value={axisView(axis)}>
      <title>{title === 'Hadamark' ? 'Hadamark, a registry of validated inverse methods' : `${title} · Hadamark`}</title>
      {rule ? <NoiseRuleBand {...rule} /> : null}
      <main id="main" tabIndex={-1} className={className ? `wrap ${className}` : 'wrap'}>{children}</main>
    </AxisContext>
  );
}
