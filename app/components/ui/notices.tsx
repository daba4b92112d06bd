import type { ReactNode } from 'react';
import { isApiError } from '../../lib/api-client';
import { formatPercent } from '../../lib/format';
import { Box } from './box';
import { Button } from './button';

/** What is absent and what would bring it. */
export function Empty({ title, children }: { title: ReactNode; children?: ReactNode }) {
  return (
    <div className="sheet empty">
      <svg width="56" height="40" viewBox="0 0 56 40" aria-hidden="true">
        <path d="M2 30H54" stroke="var(--ink-3)" />
        <path d="M6 30V24M14 30V26M22 30V24M30 30V26M38 30V24M46 30V26" stroke="var(--ink-3)" />
        <rect x="20" y="6" width="14" height="30" rx="2" fill="var(--glass)" stroke="var(--petrol)" />
        <path d="M27 8V38" stroke="var(--petrol)" strokeWidth="1.4" />
      </svg>
      <div>
        <b>{title}</b>
        {children ? <div className="sm">{children}</div> : null}
      </div>
    </div>
  );
}

/** Outline at once, then the image. `disc` draws the outline of an image with its electrodes. */
export function Loading({ label, disc = false }: { label: string; disc?: boolean }) {
  return (
    <div className="sheet pad flex gap-x3 items-center" role="status">
      {disc ? <DiscOutline /> : null}
      <div className="grow">
        <div className="sk" style={{ width: '72%' }} />
        <div className="sk" style={{ width: '92%', marginTop: 9 }} />
        <div className="sk" style={{ width: '48%', marginTop: 9 }} />
        <p className="sm" style={{ marginTop: 9 }}>{label}</p>
      </div>
    </div>
  );
}

export function DiscOutline({ size = 92, electrodes = 16 }: { size?: number; electrodes?: number }) {
  return (
    <svg width={size} height={size} viewBox="-50 -50 100 100" aria-hidden="true" style={{ flex: 'none' }}>
      <circle r="44" fill="none" stroke="var(--line)" strokeDasharray="3 3" />
      {Array.from({ length: electrodes }, (_, i) => {
        const a = (i * 2 * Math.PI) / electrodes;
        const at = (t: number) => `${(47 * Math.cos(t)).toFixed(1)} ${(47 * Math.sin(t)).toFixed(1)}`;
        return <path key={i} d={`M${at(a - 0.07)}A47 47 0 0 1 ${at(a + 0.07)}`} stroke="var(--line)" strokeWidth="3" fill="none" />;
      })}
    </svg>
  );
}

/** What happened and what to do, from an ApiError or any error. */
export function ErrorPanel({ error, what, onRetry }: { error: unknown; what?: string; onRetry?: () => void }) {
  const title = isApiError(error) ? error.title : 'Something went wrong on this page';
  const detail = error instanceof Error ? error.message : String(error);
  const requestId = isApiError(error) ? error.requestId : undefined;
  return (
    <Box tone="failure" title={what ? `${what}: ${title.toLowerCase()}` : title} alert>
      <p>{detail}</p>
      {requestId ? <p className="mono" style={{ fontSize: 12, marginTop: 6 }}>request {requestId}</p> : null}
      {onRetry ? <div style={{ marginTop: 12 }}><Button onClick={onRetry}>Try again</Button></div> : null}
    </Box>
  );
}

/** Beside a reading under the gap between the simulating and the inverting model. */
export function BelowFloor({ noise, floor }: { noise: number; floor: number }) {
  return (
    <div className="sheet pad" style={{ fontSize: 13.5 }}>
      <span className="kd" />
      <b>{formatPercent(noise)} is below the model-error floor of {formatPercent(floor)}.</b> The gap between the simulating and the inverting model is larger than this noise, so the errors here say little about it.
    </div>
  );
}

/** A sealed ground truth: lock on a hatched disc. */
export function SealedDisc({ size = 62 }: { size?: number | string }) {
  return (
    <svg width={size} height={size} viewBox="-103 -103 206 206" aria-hidden="true" style={{ display: 'block', flex: 'none' }}>
      <defs>
        <pattern id="sealed-hatch" width="14" height="14" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <line x1="0" x2="0" y1="0" y2="14" stroke="var(--line)" strokeWidth="2" />
        </pattern>
      </defs>
      <circle r="100" fill="url(#sealed-hatch)" stroke="var(--ink)" strokeWidth="3" />
      <rect x="-34" y="-14" width="68" height="52" fill="var(--sheet)" stroke="var(--ink)" strokeWidth="5" />
      <path d="M-20-14V-30A20 20 0 0 1 20-30V-14" fill="none" stroke="var(--ink)" strokeWidth="6" />
    </svg>
  );
}
