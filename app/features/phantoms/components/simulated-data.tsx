import { useMemo, useState } from 'react';
import { DataFrameChart } from '../../../components/charts/data-frame-chart';
import { DataMatrix } from '../../../components/charts/data-matrix';
import { IconButton } from '../../../components/ui/button';
import { Segmented } from '../../../components/ui/segmented';
import { formatPercent } from '../../../lib/format';
import { usePhone } from '../../../lib/use-media';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { noiseReferenceWords } from '../model/phantom-facts';
import { previewSeed, scaledFrame } from '../model/noisy-data';

const views = [{ value: 'voltages', label: 'Voltages' }, { value: 'residual', label: 'Residual to background' }, { value: 'matrix', label: 'As matrix' }] as const;
type View = (typeof views)[number]['value'];

/** Data at the rule's noise: without noise, the range of 90 % of the draws, and draw 1. */
export function SimulatedData({ simulation, noise }: { simulation: Simulation; noise: number }) {
  const [view, setView] = useState<View>('voltages');
  const [pattern, setPattern] = useState(0);
  const phone = usePhone();
  const shown = view === 'matrix' ? 'residual' : view;
  const data = useMemo(() => scaledFrame(simulation, shown, noise), [simulation, shown, noise]);
  const what = view === 'voltages' ? 'Boundary voltages' : 'Change from the background';
  const step = (by: number) => setPattern((pattern + by + simulation.patterns) % simulation.patterns);
  return (
    <section className="sec">
      <header style={{ alignItems: 'center' }}>
        <h2>Simulated data at {formatPercent(noise)} noise</h2>
        <Segmented label="Data view" value={view} choices={views} onChange={setView} />
      </header>
      <div className="sheet">
        {phone && view !== 'matrix' ? (
          <div className="pst">
            <IconButton label="Previous pattern" onClick={() => step(-1)}>‹</IconButton>
            <span><b>Drive {simulation.patternNames[pattern]}</b><span className="sm">{simulation.valuesPerPattern} measurements, pattern {pattern + 1} of {simulation.patterns}</span></span>
            <IconButton label="Next pattern" onClick={() => step(1)}>›</IconButton>
          </div>
        ) : null}
        <div style={{ padding: '12px 14px 10px 6px' }}>
          {view === 'matrix' ? (
            <div style={{ paddingLeft: 12 }}><DataMatrix label="Noisy change from the background, draw 1" values={data.draw} rows={simulation.patterns} columns={simulation.valuesPerPattern} unit={data.unit} map="diverging" /></div>
          ) : (
            <DataFrameChart label={`${what} at ${formatPercent(noise)} noise, line without noise, band of 90 % of the draws, dots draw 1`} values={data.values} noiseBand={data.band} draw={data.draw} valuesPerPattern={simulation.valuesPerPattern} patternNames={simulation.patternNames} channelNames={simulation.channelNames} unit={data.unit} pattern={phone ? pattern : null} />
          )}
          <p className="sm" style={{ padding: '6px 0 0 46px' }}>
            {view === 'matrix' ? 'Colours: draw 1' : 'Line: without noise. Band: 90 % of draws. Dots: draw 1'}, seed {previewSeed}. The noise is relative to {noiseReferenceWords[simulation.noiseReference]}.
          </p>
        </div>
      </div>
    </section>
  );
}
