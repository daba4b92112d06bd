import type { RunDetail } from '../../../../shared/contracts/runs';
import { Checkbox } from '../../../components/ui/field';
import { Segmented } from '../../../components/ui/segmented';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { formatNumber } from '../../../lib/format';
import { withUnit } from '../../../lib/problem-words';
import type { DrawChoice } from '../api/get-run-image';

interface ImageToolsProps {
  run: RunDetail;
  level: number;
  draw: DrawChoice;
  onDraw: (draw: DrawChoice) => void;
  locked: number | null;
  onLock: (limit: number | null) => void;
  /** Limit of the difference scale now. */
  limit: number | null;
  stored: boolean;
}

/** Which draw is shown, and whether the difference scale stays across noise levels. */
export function ImageTools({ run, level, draw, onDraw, locked, onLock, limit, stored }: ImageToolsProps) {
  const kind = typeof draw === 'number' ? 'one' : draw;
  const axis = useAxis();
  const at = axis.isNoise ? axis.format(run.ladder[level] ?? 0) : axis.at(run.ladder[level] ?? 0);
  const median = run.table['relative-l2-error']?.[level]?.medianDraw ?? 0;
  return (
    <div className="run-tools">
      <Segmented
        label="Draw shown"
        value={kind}
        onChange={(value) => onDraw(value === 'one' ? median : value)}
        choices={[{ value: 'median', label: 'Median draw' }, { value: 'worst', label: 'Worst draw' }, { value: 'one', label: 'Choose' }]}
      />
      {kind === 'one' ? (
        <label className="flex gap-x2 items-center">
          <span>draw</span>
          <select className="t" style={{ width: 84 }} value={draw} onChange={(event) => onDraw(Number(event.target.value))}>
            {Array.from({ length: run.draws }, (_, i) => <option key={i} value={i}>{i + 1}</option>)}
          </select>
        </label>
      ) : null}
      <span className="check-line"><Checkbox checked={locked !== null} disabled={limit === null} onChange={(event) => onLock(event.target.checked ? limit : null)}>Keep the difference scale at ±{withUnit(formatNumber(locked ?? limit, 2), run.unit)}</Checkbox></span>
      <span className="sm">{stored ? `Stored with the run, at ${at}.` : `Recomputed just now from its seed, at ${at}.`}</span>
    </div>
  );
}
