import type { LevelStatistics } from '../../../../shared/contracts/common';
import type { RunDetail } from '../../../../shared/contracts/runs';
import { CropImage } from '../../../components/images/crop-image';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { formatError } from '../../../lib/format';
import { withUnit } from '../../../lib/problem-words';
import type { RunPictures } from '../model/pictures';

/** L2 against L-infinity: what they say of the same draws, and the picture at the spot where the largest error sits. */
export function Disagreement({ run, level, pictures }: { run: RunDetail; level: number; pictures: RunPictures }) {
  const axis = useAxis();
  const l2 = run.table['relative-l2-error']?.[level];
  const sup = run.table['sup-error']?.[level];
  const trivial = run.trivial['sup-error'] ?? null;
  if (!l2 || !sup || l2.median === null || sup.median === null || !trivial || !pictures.spot || !pictures.truth || !pictures.difference) return null;
  const relative = sup.median / trivial;
  const worse = countAbove(sup, trivial);
  const half = 0.2 * run.grid.bodyRadius;
  const crop = { centre: pictures.spot, halfWidth: half, mark: pictures.spot };
  return (
    <div className="sheet spot">
      <p className="say">
        At {axis.isNoise ? axis.format(l2.level) : axis.at(l2.level)} the median error is <b>{formatError(l2.median)}</b> of the contrast in L2 and <b>{formatError(relative)}</b> of the trivial reconstruction's in L∞
        {' '}({withUnit(formatError(sup.median), run.unit)}). {worse} of {sup.count} draws have a spot at least as wrong as the background alone.
      </p>
      <div className="crops">
        <figure><CropImage label="Truth at the largest error" picture={pictures.truth} low={pictures.low} high={pictures.high} {...crop} /><figcaption>truth</figcaption></figure>
        <figure><CropImage label="Reconstruction at the largest error" picture={pictures.image} low={pictures.low} high={pictures.high} {...crop} /><figcaption>reconstruction</figcaption></figure>
        <figure><CropImage label="Difference at the largest error" picture={pictures.difference} map="diverging" low={-pictures.limit} high={pictures.limit} {...crop} /><figcaption>difference</figcaption></figure>
      </div>
    </div>
  );
}

const countAbove = (row: LevelStatistics, bound: number): number => row.draws.filter((value) => value !== null && value >= bound).length;
