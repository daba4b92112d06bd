import { useMemo, useState } from 'react';
import { Link } from 'react-router-dom';
import { ColourBar, scaleTexts } from '../../../components/images/colour-bar';
import { BodyImage } from '../../../components/images/body-image';
import { problemElectrodes } from '../../../components/images/electrode-layout';
import { toPicture } from '../../../components/images/pixels';
import { FactList } from '../../../components/ui/layout';
import { SealedDisc } from '../../../components/ui/notices';
import { Seal } from '../../../components/ui/seal';
import { Segmented } from '../../../components/ui/segmented';
import { StateMark } from '../../../components/ui/state-mark';
import { formatDate, formatHash, formatNumber } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { unitAfter, withUnit } from '../../../lib/problem-words';
import { familyNames } from '../../../../shared/domain/families';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import { phantomFacts } from '../model/phantom-facts';
import { colourRange } from '../model/truth-picture';
import { GeometryPanel } from './geometry-figure';

const figures = [{ value: 'truth', label: 'Ground truth' }, { value: 'geometry', label: 'Geometry' }] as const;

/** Geometry, truth and facts; on phones one figure at a time. */
export function PhantomTop({ detail, simulation }: { detail: PhantomDetail; simulation: Simulation | undefined }) {
  const [figure, setFigure] = useState<'truth' | 'geometry'>('truth');
  const { version } = detail;
  const { truth, family } = version.definition;
  const { valueName, valueUnit } = familyNames[family];
  const electrodes = useMemo(() => problemElectrodes(version.definition), [version.definition]);
  const line = family === 'integral-equation';
  const picture = useMemo(() => (simulation?.truth ? toPicture(decodeArray(simulation.truth), simulation.grid) : null), [simulation]);
  const background = truth?.background ?? simulation?.background ?? 0;
  const [low, high] = colourRange(simulation?.truthRange ?? null, background);
  const sealed = version.sealed && !truth;
  return (
    <>
      <div className="only-m" style={{ marginBottom: 10 }}><Segmented label="Which figure" value={figure} choices={figures} onChange={setFigure} /></div>
      <section className="sheet ph-top" data-figure={figure}>
        <GeometryPanel definition={version.definition} />
        <div>
          <h2>Ground truth <span>{valueName}{unitAfter(valueUnit)}</span></h2>
          {sealed ? (
            <div className="sealedbox"><SealedDisc size="62%" /><p className="sm">Withheld until {version.sealedUntil ? formatDate(`${version.sealedUntil}T12:00:00Z`) : 'it opens'}. Curators of its group and reviewers can see it.</p></div>
          ) : (
            <>
              <BodyImage
                label={`Ground truth of ${version.name}, from ${withUnit(`${formatNumber(simulation?.truthRange?.[0], 3)} to ${formatNumber(simulation?.truthRange?.[1], 3)}`, valueUnit)}`}
                picture={picture} body={simulation?.grid.body} low={low} high={high} numbered={electrodes !== null && electrodes.arcs.length <= 16} electrodes={electrodes}
              />
              {line ? null : <div style={{ marginTop: 8 }}><ColourBar labels={scaleTexts(low, high, background, valueUnit)} /></div>}
            </>
          )}
        </div>
        <div>
          <div className="ph-state">
            <Seal hash={version.contentHash} size={84} lines={6} />
            <div>
              <SealState detail={detail} />
              <p className="mono hash" title={version.contentHash}>{formatHash(version.contentHash)}</p>
            </div>
          </div>
          <FactList
            facts={[
              ...phantomFacts(detail, simulation),
              ['Used in', version.usedIn.length ? version.usedIn.map((bench, i) => <span key={bench.id}>{i ? ', ' : ''}<Link to={paths.bench(bench.slug)} title={bench.title}>{bench.id}</Link></span>) : 'no bench yet'],
            ]}
          />
        </div>
      </section>
    </>
  );
}

function SealState({ detail: { version } }: { detail: PhantomDetail }) {
  const opened = version.publishedAt ? formatDate(version.publishedAt) : null;
  if (version.state !== 'published') {
    return <><StateMark state={version.state} /><p className="big">Version {version.n}</p><p className="sm">{version.state === 'draft' ? 'Only the group sees a draft.' : version.state === 'submitted' ? 'Waits for a reviewer outside the group.' : version.state === 'withdrawn' ? 'Kept, marked, and out of new benches.' : 'The reviewer asks for changes.'}</p></>;
  }
  if (version.sealed) {
    return <><StateMark state="sealed" /><p className="big">Opens {version.sealedUntil ? formatDate(`${version.sealedUntil}T12:00:00Z`) : 'later'}</p><p className="sm">The hash was published on the day it was sealed.</p></>;
  }
  const until = version.sealedUntil;
  return <><StateMark state="pass" word={until ? 'Unsealed' : 'Published'} /><p className="big">Open since {until ? formatDate(`${until}T12:00:00Z`) : opened}</p><p className="sm">The truth is public.{until ? ' Results before that date stay marked as blind.' : ''}</p></>;
}
