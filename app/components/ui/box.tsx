import clsx from 'clsx';
import type { ReactNode } from 'react';
import { StateShape, type MarkState } from './state-mark';

const tones = {
  caution: ['am', 'caution'],
  failure: ['br', 'fail'],
  proof: ['pe', 'pass'],
  plain: ['', null],
} as const satisfies Record<string, readonly [string, MarkState | null]>;

/** A notice, anywhere in a page: its title is no heading, so that it breaks no order of headings. Amber before a risk, brick after a failure, petrol for a proof. At most one of each on a screen. */
export function Box({ tone, title, state, alert = false, className, children }: { tone: keyof typeof tones; title?: ReactNode; state?: MarkState; alert?: boolean; className?: string; children?: ReactNode }) {
  const [css, standing] = tones[tone];
  const shape = state ?? standing;
  return (
    <div className={clsx('box', css, className)} role={alert ? 'alert' : undefined}>
      {title ? <p className="box-title">{shape ? <StateShape state={shape} size={15} /> : null}{title}</p> : null}
      {children ? <div>{children}</div> : null}
    </div>
  );
}
