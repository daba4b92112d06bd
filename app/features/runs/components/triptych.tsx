import type { ReactNode } from 'react';
import type { RunDetail, TrialWire } from '../../../../shared/contracts/runs';
import { ColourBar, scaleTexts } from '../../../components/images/colour-bar';
import { BodyImage } from '../../../components/images/body-image';
import { problemElectrodes } from '../../../components/images/electrode-layout';
import { SealedDisc } from '../../../components/ui/notices';
import { isLine } from '../../../components/images/pixels';
import { formatDate, formatError, formatNumber } from '../../../lib/format';
import { withUnit } from '../../../lib/problem-words';
import type { RunPictures } from '../model/pictures';

export interface TriptychProps {
  run: RunDetail;
  trial: TrialWire | null;
  /** 'median of 24' or 'worst of 24', or empty for a chosen draw. */
  drawWords: string;
  pictures: RunPictures | null;
  cutAngle: number;
  cut: ReactNode;
}

export const scaleLabels = (run: RunDetail, p: RunPictures, middle: string): string[] => [formatNumber(p.low, 2), middle, withUnit(formatNumber(p.high, 2), run.unit)];
export const differenceLabels = (run: RunDetail, p: RunPictures): string[] => [`−${p.limit}`, '0', withUnit(`+${p.limit}`, run.unit)];

export function SealedTruth({ run }: { run: RunDetail }) {
  return (
    <div className="sealed-note">
      <SealedDisc size={120} />
      <p className="sm">{run.phantom.sealedUntil ? `Sealed until ${formatDate(run.phantom.sealedUntil)}. Errors are computed against it on the server.` : 'Sealed.'}</p>
    </div>
  );
}

const targetSign = (
  <svg width="13" height="13" viewBox="-8 -8 16 16" style={{ verticalAlign: '-2px', display: 'inline' }} role="img" aria-label="the target mark">
    <circle r="4" fill="none" stroke="currentColor" strokeWidth="1.5" />
    <path d="M-8 0h4M4 0h4M0-8v4M0 4v4" stroke="currentColor" strokeWidth="1.5" />
  </svg>
);

/** Truth and reconstruction on one scale, the difference on its own symmetric scale with the largest error marked, and the cut. */
export function Triptych({ run, trial, drawWords, pictures, cutAngle, cut }: TriptychProps) {
  const line = isLine(run.grid);
  const shared = { electrodes: problemElectrodes(run.problem), body: run.grid.body, low: pictures?.low ?? 0, high: pictures?.high ?? 1 };
  return (
    <section className="sheet trip only-d" aria-label="Truth, reconstruction and difference">
      <div>
        <h3>Truth <span>{run.phantom.id} v{run.phantom.version}</span></h3>
        {pictures && !pictures.truth ? <SealedTruth run={run} /> : (
          <>
            <BodyImage label={`Truth of ${run.phantom.name}`} picture={pictures?.truth ?? null} cutAngle={pictures ? cutAngle : null} {...shared} />
            {pictures && !line ? <ColourBar labels={scaleTexts(pictures.low, pictures.high, run.background, run.unit)} /> : null}
          </>
        )}
      </div>
      <div>
        <h3>Reconstruction <span>{trial ? `draw ${trial.draw + 1}${drawWords ? `, ${drawWords}` : ''}` : ''}</span></h3>
        <BodyImage label={`Reconstruction by ${run.solver.name}`} picture={pictures?.image ?? null} under={pictures?.truth} cutAngle={pictures ? cutAngle : null} {...shared} />
        {pictures && !line ? <ColourBar labels={scaleLabels(run, pictures, pictures.truth ? 'same scale as truth' : '')} /> : null}
      </div>
      <div>
        <h3>Difference <span>{trial && pictures?.spot ? <>L2 {formatError(trial.metrics['relative-l2-error'])}, largest {formatError(pictures.spot.value)} at {targetSign}</> : null}</span></h3>
        {pictures && !pictures.difference ? <SealedTruth run={run} /> : (
          <>
            <BodyImage label="Reconstruction minus truth" picture={pictures?.difference ?? null} map="diverging" body={run.grid.body} low={-(pictures?.limit ?? 1)} high={pictures?.limit ?? 1} electrodes={problemElectrodes(run.problem)} mark={pictures?.spot ?? null} />
            {pictures && !line ? <ColourBar map="diverging" labels={differenceLabels(run, pictures)} /> : null}
          </>
        )}
      </div>
      <div>
        {line ? <h3>Both on one scale <span>truth dashed</span></h3> : <h3>Cut from A to B <span>through the centre</span></h3>}
        {cut}
      </div>
    </section>
  );
}
