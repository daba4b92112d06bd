import { useEffect, useMemo, useState } from 'react';
import { CheckRow } from '../../../components/ui/checks';
import { FactList } from '../../../components/ui/layout';
import { ErrorPanel } from '../../../components/ui/notices';
import { formatNumber, formatPercent, formatQuantity } from '../../../lib/format';
import { norm2 } from '../../../../solvers/core/vector';
import type { Simulation } from '../../../../shared/contracts/simulations';
import type { FamilyKey } from '../../../../shared/domain/families';
import { checkBound, checkReading, phantomCheckNames } from '../model/check-rows';
import { dataWords } from '../model/data-words';
import { signalOverNoise } from '../model/noise-band';
import { scaledFrame } from '../model/noisy-data';
import { ChangeMatrix } from './change-matrix';
import { DataLines, DataPicture } from './data-figure';

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

export function LivePanel({ family, live, noise, settled }: { family: FamilyKey; live: LiveState; noise: number; settled: number }) {
  const { simulation } = live;
  const status = live.blocked ?? (live.stale ? 'simulating' : simulation ? `simulated in ${formatNumber(simulation.seconds, 2)} s` : 'simulating');
  return (
    <>
      <div className="sh"><h2 style={{ fontSize: 18 }}>Simulated at {formatPercent(noise)}</h2><p aria-live="polite">{status}</p></div>
      {live.error ? <div style={{ padding: '8px 16px' }}><ErrorPanel error={live.error} what="Simulation" onRetry={live.retry} /></div> : null}
      {simulation ? (
        <div className={live.stale ? 'stale' : undefined}>
          <div style={{ padding: '6px 14px 0 4px' }}>
            <LiveChart family={family} simulation={simulation} noise={noise} />
          </div>
          {dataWords[family].picture ? <div className="key"><span>Colours: draw 1</span></div> : <div className="key">
            <span><svg width="20" height="8" aria-hidden="true"><line x2="20" y1="4" y2="4" stroke="var(--petrol)" strokeWidth="2" /></svg> without noise</span>
            <span><svg width="10" height="8" aria-hidden="true"><circle cx="5" cy="4" r="2.2" fill="var(--ink)" /></svg> draw 1</span>
          </div>}
          <div className={family === 'electrical-impedance' ? 'mxrow' : 'mxrow one'}>
            {family === 'electrical-impedance' ? <ChangeMatrix simulation={simulation} /> : null}
            <FactList facts={liveFacts(family, simulation, noise)} />
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
          : live.checksError ? null : phantomCheckNames[family].map((check, i) => (
              <CheckRow key={check.name} name={check.name} how={check.how} state={i === 0 && simulation && !live.stale && !live.blocked ? 'running' : 'pending'} word={i === 0 && simulation && !live.stale && !live.blocked ? 'Settling' : 'Waiting'} />
            ))}
      </div>
    </>
  );
}

/** The first patterns as lines, a curve, or the data as a picture. */
function LiveChart({ family, simulation, noise }: { family: FamilyKey; simulation: Simulation; noise: number }) {
  const data = useMemo(() => scaledFrame(simulation, 'frame', noise), [simulation, noise]);
  const { frame, picture } = dataWords[family];
  const at = `at ${formatPercent(noise)} noise`;
  if (picture) return <div style={{ paddingLeft: 12 }}><DataPicture family={family} simulation={simulation} data={data} label={`Simulated ${frame} ${at}, draw 1`} /></div>;
  const shown = Math.min(4, simulation.patterns);
  const channelNames = simulation.channelNames.slice(0, shown);
  const count = channelNames.reduce((sum, names) => sum + names.length, 0);
  const first = { ...simulation, patterns: shown, patternNames: simulation.patternNames.slice(0, shown), channelNames };
  const label = shown < simulation.patterns ? `Simulated ${frame} of the first ${shown} of ${simulation.patterns} patterns ${at}` : `Simulated ${frame} ${at}`;
  return <DataLines family={family} simulation={first} data={{ ...data, values: data.values.slice(0, count), draw: data.draw.slice(0, count), band: 0 }} label={label} group={null} height={176} />;
}

function liveFacts(family: FamilyKey, simulation: Simulation, noise: number): [string, string][] {
  const floor: [string, string] = ['Model-error floor', formatPercent(simulation.modelErrorFloor)];
  if (family !== 'electrical-impedance') {
    const frame = Float64Array.from(simulation.frame);
    const scale = noise * simulation.noiseScale;
    const largest = frame.reduce((most, v) => Math.max(most, Math.abs(v)), 0);
    return [['Values', String(frame.length)], ['Norm of the data over the noise', scale > 0 ? `× ${formatNumber(norm2(frame) / scale, 2)}` : '–'], ['Largest value', formatNumber(largest, 3)], floor];
  }
  const ratio = signalOverNoise(Float64Array.from(simulation.frame), Float64Array.from(simulation.reference), noise, simulation.noiseScale);
  return [
    ['Signal over noise', ratio === null ? '–' : `× ${formatNumber(ratio, 2)}`],
    ['Largest change', formatQuantity(simulation.largestChange, simulation.dataUnit, 2)],
    floor,
  ];
}
