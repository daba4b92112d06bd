import { useEffect, useMemo, useState } from 'react';
import { DataFrameChart } from '../../../components/charts/data-frame-chart';
import { CheckRow } from '../../../components/ui/checks';
import { FactList } from '../../../components/ui/layout';
import { ErrorPanel } from '../../../components/ui/notices';
import { formatNumber, formatPercent, formatQuantity } from '../../../lib/format';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { checkBound, checkReading, phantomCheckNames } from '../model/check-rows';
import { signalOverNoise } from '../model/noise-band';
import { scaledFrame } from '../model/noisy-data';
import { ChangeMatrix } from './change-matrix';

export interface LiveState {
  /** The newest data, of the form as it was if `stale`. */
  readonly simulation: Simulation | null;
  readonly stale: boolean;
  readonly error: unknown;
  /** Checks of the present form, null while they are waited for. */
  readonly checks: Simulation['checks'] | null;
  readonly checksError: unknown;
  /** Why nothing is simulated, where nothing is. */
  readonly blocked: string | null;
  readonly retry: () => void;
}

const settleMs = 260;

/** Counts the checks that have settled: after a change all wait, then they settle one by one. */
export function useSettled(checks: Simulation['checks'] | null): number {
  const [state, setState] = useState<{ of: Simulation['checks'] | null; count: number }>({ of: null, count: 0 });
  const count = state.of === checks ? state.count : 0;
  useEffect(() => {
    if (!checks || count >= checks.length) return undefined;
    const timer = window.setTimeout(() => setState({ of: checks, count: count + 1 }), settleMs);
    return () => window.clearTimeout(timer);
  }, [checks, count]);
  return checks ? count : 0;
}

export function LivePanel({ live, noise, settled }: { live: LiveState; noise: number; settled: number }) {
  const { simulation } = live;
  const shown = Math.min(4, simulation?.patterns ?? 4);
  const status = live.blocked ?? (live.stale ? 'simulating' : simulation ? `simulated in ${formatNumber(simulation.seconds, 2)} s` : 'simulating');
  return (
    <>
      <div className="sh"><h2 style={{ fontSize: 18 }}>Simulated at {formatPercent(noise)}</h2><p aria-live="polite">{status}</p></div>
      {live.error ? <div style={{ padding: '8px 16px' }}><ErrorPanel error={live.error} what="Simulation" onRetry={live.retry} /></div> : null}
      {simulation ? (
        <div className={live.stale ? 'stale' : undefined}>
          <div style={{ padding: '6px 14px 0 4px' }}>
            <LiveChart simulation={simulation} noise={noise} shown={shown} />
          </div>
          <div className="key">
            <span><svg width="20" height="8" aria-hidden="true"><line x2="20" y1="4" y2="4" stroke="var(--petrol)" strokeWidth="2" /></svg> without noise</span>
            <span><svg width="10" height="8" aria-hidden="true"><circle cx="5" cy="4" r="2.2" fill="var(--ink)" /></svg> draw 1</span>
          </div>
          <div className="mxrow">
            <ChangeMatrix simulation={simulation} />
            <FactList facts={liveFacts(simulation, noise)} />
          </div>
        </div>
      ) : live.error ? null : (
        <div style={{ padding: '6px 16px 12px' }}>
          <div className="sk" style={{ height: 158 }} />
          <p className="sm" style={{ paddingTop: 8 }}>{live.blocked ? 'The data appear here as soon as the fields above can be simulated.' : 'The first simulation takes a few seconds.'}</p>
        </div>
      )}
      <div style={{ borderTop: '1px solid var(--hair-2)' }} aria-live="polite">
        {live.checksError ? <div style={{ padding: 12 }}><ErrorPanel error={live.checksError} what="Checks" onRetry={live.retry} /></div> : null}
        {live.checks
          ? live.checks.map((check, i) => (
              <CheckRow key={check.key} name={check.name} how={checkBound(check) || check.meaning} reading={i < settled ? checkReading(check) : ''} state={i < settled ? check.state : i === settled ? 'running' : 'pending'} word={i < settled ? undefined : i === settled ? 'Settling' : 'Waiting'} />
            ))
          : live.checksError ? null : phantomCheckNames.map((check, i) => (
              <CheckRow key={check.name} name={check.name} how={check.how} state={i === 0 && simulation && !live.stale && !live.blocked ? 'running' : 'pending'} word={i === 0 && simulation && !live.stale && !live.blocked ? 'Settling' : 'Waiting'} />
            ))}
      </div>
    </>
  );
}

function LiveChart({ simulation, noise, shown }: { simulation: Simulation; noise: number; shown: number }) {
  const drawn = useMemo(() => scaledFrame(simulation, 'voltages', noise), [simulation, noise]);
  const count = shown * simulation.valuesPerPattern;
  return (
    <DataFrameChart
      label={`Simulated voltages of the first ${shown} of ${simulation.patterns} patterns at ${formatPercent(noise)} noise`} height={176}
      values={drawn.values.slice(0, count)} draw={drawn.draw.slice(0, count)} unit={drawn.unit}
      valuesPerPattern={simulation.valuesPerPattern} patternNames={simulation.patternNames.slice(0, shown)} channelNames={simulation.channelNames}
    />
  );
}

function liveFacts(simulation: Simulation, noise: number): [string, string][] {
  const ratio = signalOverNoise(Float64Array.from(simulation.frame), Float64Array.from(simulation.reference), noise, simulation.noiseScale);
  return [
    ['Signal over noise', ratio === null ? '–' : `× ${formatNumber(ratio, 2)}`],
    ['Largest change', formatQuantity(simulation.largestChange, 'V', 2)],
    ['Model-error floor', formatPercent(simulation.modelErrorFloor)],
  ];
}
