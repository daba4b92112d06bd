import { useMemo } from 'react';
import { ColourBar } from '../../../components/images/colour-bar';
import { BodyImage } from '../../../components/images/body-image';
import { problemElectrodes } from '../../../components/images/electrode-layout';
import { difference, differenceLimit, isLine, largest, toPicture, type Picture } from '../../../components/images/pixels';
import { Box } from '../../../components/ui/box';
import { formatCount, formatError, formatNumber, formatPercent, formatSeconds } from '../../../lib/format';
import type { costEstimateSchema } from '../../../../shared/contracts/benches';
import type { z } from 'zod';
import type { usePreview } from './use-preview';
import type { PreviewPhantom } from '../model/preview-data';
import { NoiseCurve, ParameterCurve, type NoisePoint } from './preview-charts';

interface Props {
  readonly phantom: PreviewPhantom;
  readonly preview: ReturnType<typeof usePreview>;
  readonly noise: number;
  readonly levels: readonly number[];
  readonly others: readonly (readonly NoisePoint[])[];
  /** Faults are being corrected: the picture is of the last complete configuration. */
  readonly stale: boolean;
}

export function usePreviewPictures(phantom: PreviewPhantom | null, image: Float64Array | undefined): { yours: Picture | null; error: Picture | null } {
  return useMemo(() => {
    const yours = phantom && image ? toPicture(image, phantom.grid) : null;
    return { yours, error: yours && phantom?.truth ? difference(yours, phantom.truth) : null };
  }, [phantom, image]);
}

/** What the configuration makes of draw 1 at the rule's noise, computed in this browser. */
export function PreviewPanel({ phantom, preview, noise, levels, others, stale }: Props) {
  const { image, points, draws, parameter, hasParameter } = preview;
  const { yours, error } = usePreviewPictures(phantom, image.data?.image);
  const limit = useMemo(() => (error ? differenceLimit(largest(error).value) : 0.5), [error]);
  const [low, high] = phantom.range;
  const shared = { electrodes: problemElectrodes(phantom.problem), body: phantom.grid.body };
  const l2 = image.data?.metrics['relative-l2-error'];
  const failed = image.error ?? preview.curveError;
  const busy = image.isFetching || image.isPlaceholderData || stale;
  const answer = parameter.data;
  return (
    <>
      {failed ? <div style={{ padding: '10px 16px' }}><Box tone="failure" title="The preview stopped"><p>{failed.message}</p></Box></div> : null}
      <div className={busy ? 'three stale' : 'three'}>
        <figure><figcaption><b>Truth</b></figcaption><BodyImage label={`Ground truth of ${phantom.name}`} picture={phantom.truth} low={low} high={high} {...shared} /></figure>
        <figure><figcaption><b>Yours</b><span className="tn" aria-live="polite">{l2 === undefined ? (busy ? 'computing' : '') : `L2 ${formatError(l2)}`}</span></figcaption><BodyImage label={`Your reconstruction at ${formatPercent(noise)} noise`} picture={yours} under={phantom.truth} low={low} high={high} {...shared} /></figure>
        <figure><figcaption><b>Difference</b></figcaption><BodyImage label="Reconstruction minus truth" picture={error} map="diverging" low={-limit} high={limit} {...shared} /></figure>
      </div>
      {isLine(phantom.grid) ? null : (
        <div className="bars">
          <ColourBar labels={[formatNumber(low, 2), phantom.unit, formatNumber(high, 2)]} />
          <ColourBar map="diverging" labels={[`−${limit}`, `+${limit}`]} />
        </div>
      )}
      <div className="pl">
        <div>
          <h3>Error against noise</h3>
          <NoiseCurve own={points} others={others} levels={levels} noise={noise} floor={phantom.floor} />
          <p>{points.length < levels.length ? `${points.length} of ${levels.length} levels computed. ` : `Median of ${draws === 1 ? 'one draw' : `${draws} draws`}. `}{others.length ? `Grey: the ${others.length === 1 ? 'method' : `${others.length} methods`} already on the bench. ` : ''}<span className="kd" />below the model-error floor</p>
        </div>
        <div>
          <h3>Error against the parameter</h3>
          {answer && hasParameter ? <ParameterCurve answer={answer} /> : <div style={{ height: 150, display: 'grid', placeItems: 'center' }}><span className="sm">{answer === null || !hasParameter ? 'This method has no curve to show.' : 'Computing'}</span></div>}
          {answer && hasParameter ? <p>Dot: your rule. Diamond: best possible{answer.choice?.error ? `, ${Math.max(0, Math.round((1 - answer.oracle.error / answer.choice.error) * 100))} % lower` : ''}.</p> : null}
        </div>
      </div>
    </>
  );
}

const ordinal = (n: number): string => `${n}${n % 100 >= 11 && n % 100 <= 13 ? 'th' : ({ 1: 'st', 2: 'nd', 3: 'rd' }[n % 10] ?? 'th')}`;

/** What the entry will take on the server. */
export function CostRow({ cost }: { cost: z.infer<typeof costEstimateSchema> }) {
  const ready = cost.readyAt ? new Date(cost.readyAt) : null;
  const clock = ready ? `${String(ready.getHours()).padStart(2, '0')}:${String(ready.getMinutes()).padStart(2, '0')}` : '–';
  return (
    <div className="cost" title={cost.basis}>
      <div><b className="tn">{formatCount(cost.reconstructions)}</b><span>reconstructions</span></div>
      <div><b className="tn">{formatSeconds(cost.processorSeconds)}</b><span>processor time</span></div>
      <div><b className="tn">{cost.queuePosition <= 1 ? 'next' : ordinal(cost.queuePosition)}</b><span>in the queue</span></div>
      <div><b className="tn">{ready ? `≈ ${clock}` : clock}</b><span>table ready</span></div>
    </div>
  );
}
