import { useMemo, useState } from 'react';
import { Link } from 'react-router-dom';
import type { RunDetail } from '../../../../shared/contracts/runs';
import { ColourBar } from '../../../components/images/colour-bar';
import { BodyImage } from '../../../components/images/body-image';
import { problemElectrodes } from '../../../components/images/electrode-layout';
import { cutThrough, isLine } from '../../../components/images/pixels';
import { CutChart } from '../../../components/charts/cut-chart';
import { useParam } from '../../../components/noise-rule/use-noise';
import { axisView } from '../../../lib/axis-words';
import { ButtonLink } from '../../../components/ui/button';
import { ColumnChooser } from '../../../components/ui/column-chooser';
import { Dock, Section } from '../../../components/ui/layout';
import { ErrorPanel, Loading } from '../../../components/ui/notices';
import { Segmented } from '../../../components/ui/segmented';
import { solverLook } from '../../../components/ui/solver-glyph';
import { formatError } from '../../../lib/format';
import { noiseReferenceWord, unitAfter } from '../../../lib/problem-words';
import { paths } from '../../../lib/paths';
import { usePhone } from '../../../lib/use-media';
import { useRunImage, type DrawChoice } from '../api/get-run-image';
import { fixedGroup, nearestLevel, openGroups, tableGroups } from '../model/error-table';
import { runPictures, type RunPictures } from '../model/pictures';
import { Disagreement } from './disagreement';
import { ErrorLevels, ErrorTable } from './error-table';
import { ImageTools } from './image-tools';
import { Provenance } from './provenance';
import { RecomputePanel } from './recompute-panel';
import { ReviewThread } from './review-thread';
import { RunCertificate } from './run-certificate';
import { StabilityFacts } from './stability-facts';
import { differenceLabels, scaleLabels, Triptych } from './triptych';
import { inspectedParts, VerdictForm, type InspectedPart } from './verdict-form';

/** The default cut runs through the largest declared spot of the truth, so that it crosses what there is to find. */
function cutThroughContrast(pictures: RunPictures | null, background: number): number {
  if (!pictures) return 0;
  const { grid, values } = pictures.truth ?? pictures.image;
  let best = 0;
  let at = 0;
  values.forEach((value, p) => {
    if (Math.abs(value - background) > best) {
      best = Math.abs(value - background);
      at = p;
    }
  });
  const x = grid.xMin + (((at % grid.nx) + 0.5) * (grid.xMax - grid.xMin)) / grid.nx;
  const y = grid.yMin + ((Math.floor(at / grid.nx) + 0.5) * (grid.yMax - grid.yMin)) / grid.ny;
  return Math.atan2(y, x) + Math.PI;
}

const drawFromAddress = (text: string): DrawChoice => (text === 'worst' ? 'worst' : /^\d+$/.test(text) ? Number(text) - 1 : 'median');

/** A finished run: pictures, checks, table, verdict, provenance, thread. */
export function RunResult({ run, noise, me }: { run: RunDetail; noise: number; me: string }) {
  const phone = usePhone();
  const line = isLine(run.grid);
  const axis = axisView(run.axis);
  const level = nearestLevel(run.ladder, noise);
  const [drawText, setDraw] = useParam('draw', 'median');
  const [lockText, setLock] = useParam('scale');
  const draw = drawFromAddress(drawText);
  const choice = typeof draw === 'number' && draw >= run.draws ? 'median' : draw;
  const locked = Number(lockText) > 0 ? Number(lockText) : null;
  const image = useRunImage(run.id, level, choice);
  const pictures = useMemo(() => (image.data ? runPictures(image.data.image, image.data.truth, run.grid, run.background, locked) : null), [image.data, run.grid, run.background, locked]);
  const cutAngle = useMemo(() => cutThroughContrast(pictures, run.background), [pictures, run.background]);
  const [shown, setShown] = useState<ReadonlySet<string>>(() => openGroups(run));
  const [anchor, setAnchor] = useState('');
  const [inspected, setInspected] = useState<ReadonlySet<InspectedPart>>(new Set());
  const inspect = (part: InspectedPart, seen: boolean) => setInspected((old) => { const next = new Set(old); if (seen) next.add(part); else next.delete(part); return next; });
  const trial = image.data?.trial ?? null;
  const drawWords = choice === 'median' ? `median of ${run.draws}` : choice === 'worst' ? `worst of ${run.draws}` : '';
  const cut = pictures ? (
    <CutChart
      unit={run.unit} line={line}
      truth={pictures.truth ? cutThrough(pictures.truth, cutAngle) : null}
      image={cutThrough(pictures.image, cutAngle)}
      colour={solverLook(run.glyph).colour}
    />
  ) : null;
  const table = { run, shown, current: level, onLevel: (i: number) => setNoiseLevel(run.ladder[i]), onCell: run.may.comment ? setAnchor : undefined };
  const [, setNoiseText] = useParam('noise');
  const setNoiseLevel = (value: number | undefined) => value !== undefined && setNoiseText(String(value));
  return (
    <>
      <h2 className="vh">Images</h2>
      {image.isError ? <ErrorPanel error={image.error} what="This image" onRetry={() => void image.refetch()} /> : null}
      {image.isPending ? <Loading label="Fetching the images" disc /> : phone ? <PhoneImage run={run} pictures={pictures} cutAngle={cutAngle} cut={cut} position={trial?.metrics[line ? 'peak-position-error' : 'position-error'] ?? null} l2={trial?.metrics['relative-l2-error'] ?? null} words={trial ? `draw ${trial.draw + 1}${drawWords ? `, ${drawWords}` : ''}` : ''} /> : <Triptych run={run} trial={trial} drawWords={drawWords} pictures={pictures} cutAngle={cutAngle} cut={cut} />}
      <ImageTools run={run} level={level} draw={choice} onDraw={(value) => setDraw(value === 'median' || value === 'worst' ? value : String(value + 1))} locked={locked} onLock={(value) => setLock(value === null ? null : String(value))} limit={pictures?.limit ?? null} stored={image.data?.stored ?? true} />
      <RunCertificate run={run} />
      <div className={run.may.review ? 'sec run-columns' : 'sec'}>
        <section>
          <div className="sh">
            <h2>Error table</h2>
            <div className="et-head">
              <p className="only-d">{run.draws} draws a level. Corner mark: worst draw beyond 3 sd. {axis.isNoise ? <><span className="kd" />below the model-error floor.</> : `${axis.fixed}.`}</p>
              <ColumnChooser columns={tableGroups(run).filter((group) => group.key !== fixedGroup).map((group) => ({ key: group.key, name: group.name }))} shown={shown} onChange={setShown} />
            </div>
          </div>
          {phone ? <ErrorLevels {...table} /> : <ErrorTable {...table} />}
          <p className="sm" style={{ marginTop: 7 }}>
            Relative errors are over the norm of truth minus background, so the trivial reconstruction has 1. Bias and variance are of the image over the draws of a level, squared over the same norm; their sum is the mean squared relative L2 (<Link to={paths.referenceEntry('statistics', 'bias-variance')}>definition</Link>). Noise relative to {noiseReferenceWord(run.noiseReference)}{run.problem.family === 'electrical-impedance' ? `; ${run.dataKind} data` : ''}.{axis.isNoise ? '' : ` ${axis.line}`}
          </p>
        </section>
        {run.may.review ? (
          <section id="verdict">
            <div className="sh"><h2>Verdict</h2><p>{me}</p></div>
            <VerdictForm run={run} inspected={inspected} onInspect={inspect} me={me} />
          </section>
        ) : null}
      </div>
      <Section title="Stability sheet" note="relative L2, medians over draws; intervals are 90 % bootstrap over draws"><StabilityFacts run={run} /></Section>
      {pictures?.truth ? <Section title="Two norms, two stories" note={`draws at ${axis.isNoise ? axis.format(run.ladder[level] ?? noise) : axis.at(run.ladder[level] ?? noise)}`}><Disagreement run={run} level={level} pictures={pictures} /></Section> : null}
      <div className="sec run-pair">
        <Section title="Provenance" note="everything needed to repeat the run"><Provenance run={run} /><RecomputePanel run={run} /></Section>
        <Section title="Review thread" note={run.openQuestions ? `${run.openQuestions} open` : undefined}><ReviewThread run={run} anchor={anchor} onAnchor={setAnchor} /></Section>
      </div>
      {run.may.review ? (
        <Dock>
          <div className="sm" style={{ flex: 1 }}><b style={{ color: 'var(--ink)' }}>Inspected {inspected.size} of {Object.keys(inspectedParts).length}</b></div>
          <ButtonLink look="primary" to="#verdict">Verdict</ButtonLink>
        </Dock>
      ) : null}
    </>
  );
}

type View = 'image' | 'truth' | 'difference';

/** One large image with a switch, its readings, and the cut below. */
function PhoneImage({ run, pictures, cutAngle, cut, position, l2, words }: { run: RunDetail; pictures: RunPictures | null; cutAngle: number; cut: React.ReactNode; position: number | null; l2: number | null; words: string }) {
  const [view, setView] = useState<View>('image');
  if (!pictures) return null;
  const shownView: View = pictures.truth ? view : 'image';
  const diverging = shownView === 'difference';
  return (
    <>
      <section className="sheet mimg" aria-label="Image">
        {pictures.truth ? <Segmented label="Which image" value={shownView} onChange={setView} choices={[{ value: 'image', label: 'Reconstruction' }, { value: 'truth', label: 'Truth' }, { value: 'difference', label: 'Difference' }]} /> : <p className="sm">The truth is sealed.</p>}
        <BodyImage
          label={shownView}
          under={diverging || shownView === 'truth' ? null : pictures.truth}
          picture={shownView === 'image' ? pictures.image : shownView === 'truth' ? pictures.truth : pictures.difference}
          map={diverging ? 'diverging' : 'sequential'}
          low={diverging ? -pictures.limit : pictures.low}
          high={diverging ? pictures.limit : pictures.high}
          electrodes={problemElectrodes(run.problem)}
          cutAngle={diverging ? null : cutAngle}
          mark={diverging ? pictures.spot : null}
        />
        {isLine(run.grid) ? null : <ColourBar map={diverging ? 'diverging' : 'sequential'} labels={diverging ? differenceLabels(run, pictures) : scaleLabels(run, pictures, words)} />}
        <div className="mrd">
          <div><b className="tn">{formatError(l2)}</b><span>relative L2</span></div>
          <div><b className="tn">{formatError(pictures.spot?.value)}</b><span>L∞{unitAfter(run.unit)}</span></div>
          <div><b className="tn">{position === null ? '–' : (100 * position).toFixed(1)}</b><span>{isLine(run.grid) ? 'peak, % of half length' : 'position, % of radius'}</span></div>
        </div>
      </section>
      <section className="sheet pad" style={{ marginTop: 14 }}><div className="sh"><h3>{isLine(run.grid) ? 'Truth and reconstruction' : 'Cut from A to B'}</h3></div>{cut}</section>
    </>
  );
}
