import clsx from 'clsx';
import type { ReactNode } from 'react';

const circle = (stroke: string, extra: Record<string, string | number> = {}) => <circle r="6" fill="none" stroke={stroke} strokeWidth="1.4" {...extra} />;
const tick = (stroke: string) => <path d="M-3.2 .2L-.9 2.6L3.4-2.4" fill="none" stroke={stroke} strokeWidth="1.7" />;
const triangle = (
  <>
    <path d="M0-6.4L7 5.6H-7Z" fill="none" stroke="var(--amber)" strokeWidth="1.5" />
    <path d="M0-2.4V1.8M0 3.2V4.3" stroke="var(--amber)" strokeWidth="1.5" />
  </>
);
const dashes = { strokeDasharray: '2.4 2' };
const passed = (
  <>
    <circle r="6.5" fill="var(--petrol)" />
    {tick('var(--on-petrol)')}
  </>
);
const failed = (
  <>
    <rect x="-6" y="-6" width="12" height="12" fill="var(--brick)" />
    <path d="M-3-3L3 3M3-3L-3 3" stroke="var(--sheet)" strokeWidth="1.7" />
  </>
);
const clock = (
  <>
    {circle('var(--ink-2)')}
    <path d="M0-3.4V.4H2.8" fill="none" stroke="var(--ink-2)" strokeWidth="1.4" />
  </>
);
const sheetShape = <rect x="-5" y="-6" width="10" height="12" fill="none" stroke="var(--line)" strokeWidth="1.4" strokeDasharray="2.4 2" />;
const struck = (
  <>
    <rect x="-6" y="-6" width="12" height="12" fill="none" stroke="var(--ink-2)" strokeWidth="1.4" />
    <path d="M-6 6L6-6" stroke="var(--ink-2)" strokeWidth="1.4" />
  </>
);

/** One shape per state, everywhere: word, tone, drawing in a box of -8 to 8. */
const marks = {
  'signed-off': ['Signed off', 'ok', passed],
  'signed-off-with-reservation': ['Signed off with a reservation', 'warn', <>{circle('var(--amber)', { strokeWidth: 1.5 })}{tick('var(--amber)')}</>],
  'in-review': ['In review', '', <>{circle('var(--ink-2)')}<path d="M0-6A6 6 0 0 1 0 6Z" fill="var(--ink-2)" /></>],
  unreviewed: ['Unreviewed', '', circle('var(--line)', dashes)],
  returned: ['Returned', '', <path d="M-2.6-6.2L-6.2-2.6L-2.6 1M-6-2.6H2A4.1 4.1 0 0 1 2 5.6H-3" fill="none" stroke="var(--ink-2)" strokeWidth="1.6" />],
  'changes-requested': ['Changes requested', '', <path d="M-2.6-6.2L-6.2-2.6L-2.6 1M-6-2.6H2A4.1 4.1 0 0 1 2 5.6H-3" fill="none" stroke="var(--ink-2)" strokeWidth="1.6" />],
  declined: ['Declined', 'bad', <><rect x="-6" y="-6" width="12" height="12" fill="none" stroke="var(--brick)" strokeWidth="1.5" /><path d="M-3.4 0H3.4" stroke="var(--brick)" strokeWidth="1.8" /></>],
  withdrawn: ['Withdrawn', '', struck],
  cancelled: ['Cancelled', '', struck],
  sealed: ['Sealed', '', <><rect x="-5.5" y="-1.5" width="11" height="8" fill="none" stroke="var(--ink-2)" strokeWidth="1.5" /><path d="M-3-1.5V-4A3 3 0 0 1 3-4V-1.5" fill="none" stroke="var(--ink-2)" strokeWidth="1.5" /></>],
  queued: ['Queued', '', clock],
  submitted: ['Submitted', '', clock],
  running: ['Running', 'ok', <><path d="M0-6A6 6 0 1 1-6 0" fill="none" stroke="var(--petrol)" strokeWidth="2" /><circle r="2.1" fill="var(--petrol)" /></>],
  draft: ['Draft', '', sheetShape],
  disputed: ['Disputed', 'warn', triangle],
  pass: ['Pass', 'ok', passed],
  finished: ['Finished', 'ok', passed],
  published: ['Published', 'ok', passed],
  registered: ['Registered', 'ok', passed],
  open: ['Open', 'ok', <>{circle('var(--petrol)', { strokeWidth: 1.6 })}<circle r="2.4" fill="var(--petrol)" /></>],
  closed: ['Closed', '', <><rect x="-6" y="-6" width="12" height="12" fill="none" stroke="var(--ink-2)" strokeWidth="1.4" /><rect x="-2.6" y="-2.6" width="5.2" height="5.2" fill="var(--ink-2)" /></>],
  caution: ['Caution', 'warn', triangle],
  warning: ['Warning', 'warn', triangle],
  fail: ['Fail', 'bad', failed],
  failed: ['Failed', 'bad', failed],
  pending: ['Pending', '', circle('var(--line)', dashes)],
  'not-applicable': ['Does not apply', '', <path d="M-5 0H5" stroke="var(--line)" strokeWidth="1.6" />],
} as const satisfies Record<string, readonly [string, '' | 'ok' | 'warn' | 'bad', ReactNode]>;

export type MarkState = keyof typeof marks;
export const stateWord = (state: MarkState): string => marks[state][0];

/** The shape alone, where the words beside it say the state. */
export function StateShape({ state, size = 14 }: { state: MarkState; size?: number }) {
  return (
    <svg width={size} height={size} viewBox="-8 -8 16 16" aria-hidden="true">
      {marks[state][2]}
    </svg>
  );
}

/** Shape and word. `word` replaces the standing word; `quiet` keeps the word for screen readers only. */
export function StateMark({ state, word, quiet = false, size, className }: { state: MarkState; word?: ReactNode; quiet?: boolean; size?: number; className?: string }) {
  const [standing, tone] = marks[state];
  return (
    <span className={clsx('st', tone, className)}>
      <StateShape state={state} size={size} />
      {quiet ? <span className="vh">{word ?? standing}</span> : (word ?? standing)}
    </span>
  );
}
