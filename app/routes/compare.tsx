import { useQueries } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { RunDetail } from '../../shared/contracts/runs';
import { distinctGlyphs } from '../../shared/domain/glyphs';
import { fewestPairs } from '../../solvers/statistics/wilcoxon';
import { StabilityChart } from '../components/charts/stability-chart';
import { ColourBar, scaleTexts } from '../components/images/colour-bar';
import { CropImage } from '../components/images/crop-image';
import { problemElectrodes } from '../components/images/electrode-layout';
import { difference, differenceLimit, insidePixels, isLine, largest, rangeOf, toPicture, valueScale } from '../components/images/pixels';
import { Page } from '../components/layout/page';
import { nearestLevel, ruleScale } from '../components/noise-rule/scale';
import { useNoise, useParam } from '../components/noise-rule/use-noise';
import { Button, ButtonLink, IconButton } from '../components/ui/button';
import { Box } from '../components/ui/box';
import { InlineSelect } from '../components/ui/chooser';
import { Dialog } from '../components/ui/dialog';
import { FactList, PageHead, Section } from '../components/ui/layout';
import { Empty, ErrorPanel, Loading } from '../components/ui/notices';
import { SolverGlyph } from '../components/ui/solver-glyph';
import { useBench } from '../features/benches/api/get-bench';
import { shortNames } from '../features/benches/model/names';
import { Matrix, type MatrixColumn } from '../features/compare/components/matrix';
import { NormScatter } from '../features/compare/components/norm-scatter';
import { PairedDraws } from '../features/compare/components/paired-draws';
import { disagreement, l2Key, letters, middleDraw, pairs, sharedDraws, spokenVerdict, type Contender } from '../features/compare/model/comparison';
import { getRunQueryOptions } from '../features/runs/api/get-run';
import { getRunImageQueryOptions, listTrialsQueryOptions } from '../features/runs/api/get-run-image';
import { axisFact, axisView } from '../lib/axis-words';
import { formatError, formatPercent, numberWord, plural } from '../lib/format';
import { placeWords, withUnit } from '../lib/problem-words';
import { paths } from '../lib/paths';
import { useNarrow } from '../lib/use-media';
import { useSettled } from '../lib/use-settled';
import '../styles/pages/compare.css';

export default function Compare() {
  const [text, setText] = useParam('runs');
  const ids = [...new Set(text.split(',').filter(Boolean))].slice(0, letters.length);
  const answers = useQueries({ queries: ids.map((id) => getRunQueryOptions(id)) });
  const failed = answers.find((a) => a.isError);
  const runs = answers.flatMap((a) => (a.data ? [a.data] : []));
  const setIds = (next: readonly string[]) => setText(next.join(','));
  if (ids.length === 0) {
    return (
      <Page title="Compare">
        <PageHead title="Compare runs" lead="Two to four runs on the same phantom, draw by draw." />
        <Empty title="No runs chosen">Open a bench, choose solvers and press Compare; the address then keeps them. <ButtonLink to={paths.benches()}>Benches</ButtonLink></Empty>
      </Page>
    );
  }
  if (failed) return <Page title="Compare"><PageHead title="Compare runs" /><ErrorPanel error={failed.error} what="A run" onRetry={() => void failed.refetch()} /></Page>;
  if (runs.length < ids.length) return <Page title="Compare"><PageHead title="Compare runs" /><Loading label={`Fetching ${plural(ids.length, 'run')}`} disc /></Page>;
  return <ComparePage runs={runs} setIds={setIds} />;
}

function ComparePage({ runs, setIds }: { runs: readonly RunDetail[]; setIds: (ids: readonly string[]) => void }) {
  const first = runs[0];
  if (!first) return null;
  const same = runs.every((r) => r.phantom.slug === first.phantom.slug && r.phantom.version === first.phantom.version && r.bench.slug === first.bench.slug);
  const count = numberWord(runs.length);
  return (
    <Page title={`Compare ${count} runs`} className="page-compare" axis={first.axis} rule={{ levels: first.ladder, draws: first.draws, floor: first.modelErrorFloor }}>
      <div className="head">
        <div>
          <div className="crumb">
            <span>Compare</span>
            {axisFact(first.axis) ? <span>{axisFact(first.axis)}</span> : null}
            <span>Bench <Link to={paths.bench(first.bench.slug)}>{first.bench.id}</Link></span>
            <span>Phantom <Link to={paths.phantomVersion(first.phantom.slug, first.phantom.version)}>{first.phantom.id}</Link></span>
          </div>
          <h1>{count.charAt(0).toUpperCase() + count.slice(1)} {runs.length === 1 ? 'method' : 'methods'} on <i>{first.phantom.name}</i></h1>
        </div>
        <Picked runs={runs} setIds={setIds} />
      </div>
      {!same ? (
        <Box tone="caution" title="These runs do not answer the same question">
          Draws can be paired only on one phantom version of one bench. Remove the runs on {runs.filter((r) => r.phantom.slug !== first.phantom.slug).map((r) => r.phantom.name).join(', ') || 'another bench'}.
        </Box>
      ) : <Comparison runs={runs} first={first} />}
    </Page>
  );
}

function Picked({ runs, setIds }: { runs: readonly RunDetail[]; setIds: (ids: readonly string[]) => void }) {
  const [adding, setAdding] = useState(false);
  const short = shortNames(runs.map((r) => r.solver.name));
  const glyphs = distinctGlyphs(runs.map((r) => r.glyph));
  const ids = runs.map((r) => r.id);
  return (
    <div className="pick">
      {runs.map((r, i) => (
        <span className="chip" key={r.id}>
          <span className="let">{letters[i]}</span>
          <SolverGlyph index={glyphs[i] ?? 0} size={15} />
          {short(r.solver.name)}
          <IconButton label={`Remove ${r.solver.name}`} onClick={() => setIds(ids.filter((id) => id !== r.id))}>×</IconButton>
        </span>
      ))}
      {runs.length < letters.length ? <Button onClick={() => setAdding(true)}>Add a run</Button> : null}
      {runs[0] ? <AddRun open={adding} onClose={() => setAdding(false)} bench={runs[0].bench.slug} phantom={runs[0].phantom.slug} taken={ids} onAdd={(id) => { setIds([...ids, id]); setAdding(false); }} /> : null}
    </div>
  );
}

/** The other finished runs of the same bench on the same phantom. */
function AddRun({ open, onClose, bench, phantom, taken, onAdd }: { open: boolean; onClose: () => void; bench: string; phantom: string; taken: readonly string[]; onAdd: (id: string) => void }) {
  const answer = useBench(bench);
  const found = (answer.data?.entries ?? []).flatMap((entry) => entry.runs.filter((r) => r.phantom === phantom && r.state === 'finished' && !taken.includes(r.run)).map((r) => ({ ...r, entry })));
  return (
    <Dialog open={open} onClose={onClose} title="Add a run" actions={<Button onClick={onClose}>Close</Button>}>
      <p>Finished runs of this bench on the same phantom.</p>
      <div className="others">
        {found.map(({ run, entry }) => (
          <button type="button" key={run} onClick={() => onAdd(run)}><SolverGlyph index={entry.glyph} />{entry.solver.name}<em>{entry.group.name}</em></button>
        ))}
        {answer.isPending ? <p className="sm">Fetching the bench</p> : found.length === 0 ? <p className="sm">No other run is finished here.</p> : null}
      </div>
    </Dialog>
  );
}

function Comparison({ runs, first }: { runs: readonly RunDetail[]; first: RunDetail }) {
  const axis = axisView(first.axis);
  const { noise } = useNoise();
  const narrow = useNarrow();
  const [drawText, setDraw] = useParam('draw');
  const level = nearestLevel(ruleScale(first.ladder), useSettled(noise)).index;
  const levelNoise = first.ladder[level] ?? noise;
  const trials = useQueries({ queries: runs.map((r) => listTrialsQueryOptions(r.id, level)) });
  const short = shortNames(runs.map((r) => r.solver.name));
  const glyphs = distinctGlyphs(runs.map((r) => r.glyph));
  const contenders: Contender[] = runs.map((r, i) => ({ id: r.id, letter: letters[i] ?? '', glyph: glyphs[i] ?? 0, name: r.solver.name, short: short(r.solver.name), trials: trials[i]?.data ?? [] }));
  const ready = trials.every((t) => t.data);
  const draws = sharedDraws(contenders);
  const wanted = Number(drawText) - 1;
  const draw = drawText !== '' && draws.includes(wanted) ? wanted : middleDraw(contenders[0]);
  const comparisons = ready ? pairs(contenders, l2Key) : [];
  const needed = fewestPairs(Math.max(1, (contenders.length * (contenders.length - 1)) / 2));
  const failed = trials.find((t) => t.isError);
  return (
    <>
      <section className="sheet lead2" aria-label="Verdict in words">
        <div>
          {failed ? <ErrorPanel error={failed.error} what="The draws" onRetry={() => void failed.refetch()} /> : ready ? (
            <p className="say">At <b>{axis.at(levelNoise)}</b>, {spokenVerdict(contenders, axis.noiseAt(levelNoise), first.modelErrorFloor, first.unit).map((s, i) => `${i ? ' ' : ''}${s}`).join('')}</p>
          ) : <p className="sm" role="status">Fetching {first.draws} draws of each run</p>}
        </div>
        <div>
          <FactList facts={[
            ['Blocks', `${plural(draws.length, 'draw')} of this phantom, paired by seed`],
            ['Test', <Link key="test" to={paths.referenceEntry('statistics', 'wilcoxon-holm')}>signed ranks, Holm's correction</Link>],
            ['Separable', draws.length < needed ? `needs at least ${needed} draws` : 'corrected p below 0.05'],
            ['Holds for', <span key="holds">this phantom; <Link to={`${paths.bench(first.bench.slug)}#who-beats-whom`}>over phantoms</Link></span>],
            ['Draw shown', draw === null ? '\u2013' : <InlineSelect key="draw" label="Draw shown" value={String(draw + 1)} onChange={setDraw}>{draws.map((d) => <option key={d} value={d + 1}>{d + 1}</option>)}</InlineSelect>],
          ]} />
        </div>
      </section>
      {draw === null ? null : <Pictures runs={runs} first={first} contenders={contenders} level={level} draw={draw} />}
      <section className="sec two" aria-label="Paired draws and stability">
        <div className="sheet">
          <div className="sh cap"><h2 style={{ fontSize: 18 }}>Paired draws, within this phantom</h2><p>ratio of relative L2, same seed</p></div>
          <div style={{ padding: '6px 16px 12px' }}>{comparisons.length ? <PairedDraws contenders={contenders} comparisons={comparisons} metric={l2Key} /> : <p className="sm">Two runs with shared draws are needed.</p>}</div>
        </div>
        <div className="sheet">
          <div className="sh cap"><h2 style={{ fontSize: 18 }}>Over the whole ladder</h2><p>median relative L2 on this phantom</p></div>
          <div style={{ padding: '6px 14px 8px 6px' }}>
            <StabilityChart
              label={`Relative L2 error against ${axis.isNoise ? 'noise' : axis.label}, one curve for each run`} levels={first.ladder} noise={noise} floor={first.modelErrorFloor} trivial={first.trivial[l2Key] ?? 1} height={narrow ? 300 : 316} labelRoom={narrow ? 140 : 152} terse
              curves={runs.map((r, i) => ({
                id: r.id, glyph: glyphs[i] ?? 0, name: r.solver.name, short: short(r.solver.name), breakdown: r.sheets[l2Key]?.breakdown?.value ?? null,
                points: (r.table[l2Key] ?? []).map((row) => ({ level: row.level, median: row.median, low: row.p05, high: row.p95 })),
              }))}
            />
          </div>
        </div>
      </section>
    </>
  );
}

/** The images of one draw, and the pair of runs that the two norms judge most differently. */
function Pictures({ runs, first, contenders, level, draw }: { runs: readonly RunDetail[]; first: RunDetail; contenders: readonly Contender[]; level: number; draw: number }) {
  const images = useQueries({ queries: runs.map((r) => getRunImageQueryOptions(r.id, level, draw)) });
  const inside = insidePixels(first.grid);
  const truthValues = images.find((i) => i.data?.truth)?.data?.truth ?? null;
  const truth = truthValues ? toPicture(truthValues, first.grid, inside) : null;
  const columns: MatrixColumn[] = contenders.map((contender, i) => {
    const data = images[i]?.data;
    const trial = contender.trials.find((t) => t.draw === draw);
    const image = data ? toPicture(data.image, first.grid, inside) : null;
    return {
      contender, image, difference: image && truth ? difference(image, truth) : null,
      l2: trial?.metrics[l2Key] ?? null, sup: trial?.metrics['sup-error'] ?? null,
      note: images[i]?.isError ? 'This image cannot be shown.' : 'Fetching the image',
    };
  });
  const shown = columns.flatMap((c) => (c.image ? [c.image] : []));
  const [low, high] = valueScale(rangeOf(truth ? [truth] : shown), first.background);
  const limit = differenceLimit(Math.max(0, ...columns.map((c) => (c.difference ? largest(c.difference).value : 0))));
  const readings = columns.flatMap((c) => (c.l2 !== null && c.sup !== null ? [{ contender: c.contender, l2: c.l2, sup: c.sup }] : []));
  const pair = disagreement(readings);
  const near = columns.find((c) => c.contender.id === pair?.near.id);
  const far = columns.find((c) => c.contender.id === pair?.far.id);
  return (
    <>
      <section className="sec" style={{ marginTop: 24 }} aria-labelledby="images-title">
        <h2 className="vh" id="images-title">Images</h2>
        <Matrix phantom={first.phantom} truth={truth} columns={columns} draw={draw} low={low} high={high} limit={limit} unit={first.unit} electrodes={problemElectrodes(first.problem)} grid={first.grid} start={far?.difference ? largest(far.difference) : { x: 0, y: 0 }} />
        {isLine(first.grid) ? null : <div className="bars">
          <ColourBar width={280} labels={scaleTexts(low, high, first.background, first.unit)} label="Scale of truth and reconstructions" />
          {truth ? <ColourBar map="diverging" width={280} labels={[`\u2212${limit}`, '0', withUnit(`+${limit}`, first.unit)]} label="Scale of the differences" /> : null}
        </div>}
      </section>
      {pair && near && far ? (
        <Section title={Math.abs(Math.log(pair.l2Ratio)) < 0.15 && pair.supRatio > 1.4 ? 'Close in L2, far in L∞' : 'Where the two norms differ'} note={`${pair.near.letter} and ${pair.far.letter}, draw ${draw + 1}, at ${axisView(first.axis).isNoise ? formatPercent(first.ladder[level] ?? 0) : axisView(first.axis).at(first.ladder[level] ?? 0)}`}>
          <div className="sheet dis">
            <div><NormScatter contenders={contenders} readings={readings} pair={pair} unit={first.unit} /></div>
            <div><Spot pairWords={spotWords(pair, far, first)} near={near} far={far} low={low} high={high} limit={limit} radius={first.grid.bodyRadius} /></div>
          </div>
        </Section>
      ) : null}
    </>
  );
}

type Pair = NonNullable<ReturnType<typeof disagreement>>;

function spotWords(pair: Pair, far: MatrixColumn, run: RunDetail): ReactNode {
  const spot = far.difference ? largest(far.difference) : null;
  return (
    <p className="sm" style={{ fontSize: 13 }}>
      {pair.near.short} and {pair.far.short} differ by <b>{Math.abs(pair.l2Ratio * 100 - 100).toFixed(0)} %</b> in relative L2 and by a factor of <b>{pair.supRatio.toFixed(1)}</b> in L∞.
      {spot ? ` The largest error of ${pair.far.letter} is ${withUnit(formatError(spot.value), run.unit)} at ${placeWords(run.grid.body, spot)}.` : ''}
    </p>
  );
}

function Spot({ pairWords, near, far, low, high, limit, radius }: { pairWords: ReactNode; near: MatrixColumn; far: MatrixColumn; low: number; high: number; limit: number; radius: number }) {
  if (!far.difference || !far.image || !near.image || !near.difference) return <>{pairWords}</>;
  const spot = largest(far.difference);
  const half = 0.34 * radius;
  const { body } = far.image.grid;
  const hold = (v: number, middle = 0): number => Math.min(middle + radius - half, Math.max(middle + half - radius, v));
  const crop = { centre: { x: hold(spot.x, body?.kind === 'interval' ? (body.from + body.to) / 2 : 0), y: hold(spot.y) }, halfWidth: half, mark: spot };
  const name = (c: MatrixColumn): string => `${c.contender.letter} ${c.contender.short}`;
  return (
    <>
      {pairWords}
      <div className="zoom">
        <figure><CropImage label={`${name(near)} at the spot`} picture={near.image} low={low} high={high} {...crop} /><figcaption><b>{name(near)}</b><br />largest {formatError(near.sup)}</figcaption></figure>
        <figure><CropImage label={`${name(far)} at the spot`} picture={far.image} low={low} high={high} {...crop} /><figcaption><b>{name(far)}</b><br />largest {formatError(far.sup)}</figcaption></figure>
        <figure><CropImage label={`${far.contender.letter} minus ${near.contender.letter} at the spot`} picture={difference(far.image, near.image)} map="diverging" low={-limit} high={limit} {...crop} /><figcaption><b>{far.contender.letter} minus {near.contender.letter}</b><br />scale as difference</figcaption></figure>
      </div>
    </>
  );
}
