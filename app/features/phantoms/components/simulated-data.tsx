import { useMemo, useState } from 'react';
import { IconButton } from '../../../components/ui/button';
import { Segmented } from '../../../components/ui/segmented';
import { formatPercent } from '../../../lib/format';
import { noiseReferenceWords } from '../../../lib/problem-words';
import { usePhone } from '../../../lib/use-media';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { familyNames, type FamilyKey } from '../../../../shared/domain/families';
import { dataWords } from '../model/data-words';
import { previewSeed, scaledFrame } from '../model/noisy-data';
import { DataLines, DataPicture } from './data-figure';

type View = 'frame' | 'residual' | 'matrix' | 'picture' | 'group';

/** Ways of looking at the data of a family, the first being shown. */
function viewsOf(family: FamilyKey): readonly { value: View; label: string }[] {
  const { picture, residual } = dataWords[family];
  if (picture) return [{ value: 'picture', label: picture.name }, { value: 'group', label: picture.lines }];
  return residual ? [{ value: 'frame', label: 'Voltages' }, { value: 'residual', label: 'Residual to background' }, { value: 'matrix', label: 'As matrix' }] : [{ value: 'frame', label: 'Curve' }];
}

const upperFirst = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** Data at the rule's noise: without noise, the range of 90 % of the draws, and draw 1. */
export function SimulatedData({ family, simulation, noise }: { family: FamilyKey; simulation: Simulation; noise: number }) {
  const views = viewsOf(family);
  const [view, setView] = useState<View>(views[0]?.value ?? 'frame');
  const [group, setGroup] = useState(() => (dataWords[family].picture ? Math.floor(simulation.patterns / 2) : 0));
  const phone = usePhone();
  const shown = view === 'residual' || view === 'matrix' ? 'residual' : 'frame';
  const data = useMemo(() => scaledFrame(simulation, shown, noise), [simulation, shown, noise]);
  const what = shown === 'residual' ? 'Change from the background' : upperFirst(dataWords[family].frame);
  const { groupNoun } = familyNames[family];
  const asPicture = view === 'matrix' || view === 'picture';
  const stepped = simulation.patterns > 1 && (view === 'group' || (phone && !asPicture));
  const step = (by: number) => setGroup((group + by + simulation.patterns) % simulation.patterns);
  return (
    <section className="sec">
      <header style={{ alignItems: 'center' }}>
        <h2>Simulated data at {formatPercent(noise)} noise</h2>
        {views.length > 1 ? <Segmented label="Data view" value={view} choices={views} onChange={setView} /> : null}
      </header>
      <div className="sheet">
        {stepped ? (
          <div className="pst">
            <IconButton label={`Previous ${groupNoun}`} onClick={() => step(-1)}>‹</IconButton>
            <span><b>{family === 'electrical-impedance' ? 'Drive ' : ''}{upperFirst(simulation.patternNames[group] ?? '')}</b><span className="sm">{simulation.channelNames[group]?.length ?? 0} values, {groupNoun} {group + 1} of {simulation.patterns}</span></span>
            <IconButton label={`Next ${groupNoun}`} onClick={() => step(1)}>›</IconButton>
          </div>
        ) : null}
        <div style={{ padding: '12px 14px 10px 6px' }}>
          {asPicture ? (
            <div style={{ paddingLeft: 12 }}><DataPicture family={family} simulation={simulation} data={data} label={view === 'matrix' ? 'Noisy change from the background, draw 1' : `${what} with noise, draw 1`} map={view === 'matrix' ? 'diverging' : 'sequential'} /></div>
          ) : (
            <DataLines family={family} simulation={simulation} data={data} label={`${what} at ${formatPercent(noise)} noise, line without noise, band of 90 % of the draws, dots draw 1`} group={stepped ? group : null} />
          )}
          <p className="sm" style={{ padding: '6px 0 0 46px' }}>
            {asPicture ? 'Colours: draw 1' : 'Line: without noise. Band: 90 % of draws. Dots: draw 1'}, seed {previewSeed}. The noise is relative to {noiseReferenceWords[simulation.noiseReference]}.
          </p>
        </div>
      </div>
    </section>
  );
}
