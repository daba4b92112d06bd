import { useMemo } from 'react';
import { SmallStability } from '../../../components/charts/stability-chart';
import { AxisContext } from '../../../components/noise-rule/axis-context';
import { BodyImage } from '../../../components/images/body-image';
import { ButtonLink, Button } from '../../../components/ui/button';
import { SealedDisc } from '../../../components/ui/notices';
import { StateMark } from '../../../components/ui/state-mark';
import { axisFact, axisView } from '../../../lib/axis-words';
import { paths } from '../../../lib/paths';
import { useRun } from '../../runs/api/get-run';
import { useRunImage } from '../../runs/api/get-run-image';
import { nearestLevel } from '../../runs/model/error-table';
import { runPictures } from '../../runs/model/pictures';
import type { WaitingRun } from '../api/review';

/** A short look at a waiting run: median draw at the rule's noise, its curve, its checks, and the way in. */
export function RunLook({ run, noise, onSkip }: { run: WaitingRun; noise: number; onSkip: () => void }) {
  const detail = useRun(run.id);
  const ladder = run.levels.map((row) => row.level);
  const axis = axisView(run.axis);
  const level = nearestLevel(ladder, noise);
  const image = useRunImage(run.id, level, 'median');
  const pictures = useMemo(() => (image.data && detail.data ? runPictures(image.data.image, image.data.truth, detail.data.grid, detail.data.background, null) : null), [image.data, detail.data]);
  const body = detail.data?.grid.body;
  const scale = { low: pictures?.low ?? 0, high: pictures?.high ?? 1, body };
  return (
    <div className="peek-in">
      <div className="peek-head">
        <div className="crumb"><span className="mono">{run.id}</span><span>{run.bench.title}</span></div>
        <h2>{run.solver.name}</h2>
        <p className="sm">{run.group.name}{axisFact(run.axis) ? `. ${axisFact(run.axis)}` : ''}</p>
      </div>
      <div className="g">
        <figure>{pictures && !pictures.truth ? <SealedDisc size="100%" /> : <BodyImage label="Truth" picture={pictures?.truth ?? null} {...scale} />}<figcaption>{pictures && !pictures.truth ? 'sealed' : 'truth'}</figcaption></figure>
        <figure><BodyImage label="Reconstruction" picture={pictures?.image ?? null} under={pictures?.truth} {...scale} /><figcaption>at {axis.isNoise ? axis.format(ladder[level] ?? noise) : axis.at(ladder[level] ?? noise)}</figcaption></figure>
        <figure>{pictures && !pictures.truth ? <SealedDisc size="100%" /> : <BodyImage label="Difference" picture={pictures?.difference ?? null} map="diverging" body={body} low={-(pictures?.limit ?? 1)} high={pictures?.limit ?? 1} />}<figcaption>difference</figcaption></figure>
      </div>
      <div className="peek-chart">
        <AxisContext value={axis}><SmallStability
          label={`Error of ${run.solver.name} against ${axis.isNoise ? 'noise' : axis.label}`} height={112} noise={noise} levels={ladder} floor={run.modelErrorFloor}
          curves={[{ id: run.id, glyph: run.glyph, name: run.solver.name, points: run.levels.map((row) => ({ level: row.level, median: row.median, low: row.p05, high: row.p95 })) }]}
        /></AxisContext>
      </div>
      <ul>{run.checks.map((check) => <li key={check.key}><span>{check.name}</span><StateMark state={check.state} /></li>)}</ul>
      {run.lastNote ? <p className="sm peek-note"><b>{run.lastNote.by.handle}</b> {run.lastNote.text}</p> : null}
      <div className="peek-act">
        <ButtonLink look="primary" to={`${paths.run(run.id)}?noise=${noise}`}>{run.mayReview ? 'Review this run' : 'Open this run'}</ButtonLink>
        <Button onClick={onSkip}>Skip for now</Button>
      </div>
    </div>
  );
}
