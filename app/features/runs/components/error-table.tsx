import clsx from 'clsx';
import type { LevelStatistics } from '../../../../shared/contracts/common';
import type { RunDetail } from '../../../../shared/contracts/runs';
import type { AxisView } from '../../../lib/axis-words';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { solverLook } from '../../../components/ui/solver-glyph';
import { formatError, formatNumber } from '../../../lib/format';
import { fixedGroup, isMoment, outlier, shade, tableGroups, type TableGroup } from '../model/error-table';
import { DrawDots } from './draw-dots';

const columnNames = { mean: 'mean', sd: 'sd', p05: '5 %', p95: '95 %', worst: 'worst', biasSquared: 'bias²', variance: 'variance', meanSquaredError: 'sum' } as const;

/** What the table reads of a run. */
export type TableRun = Pick<RunDetail, 'glyph' | 'ladder' | 'modelErrorFloor' | 'table' | 'trivial' | 'moments'>;

/** Value of a cell, and why there is none. */
function cellValue(run: TableRun, group: TableGroup, column: TableGroup['columns'][number], level: number): { value: number | null; reason: string | null } {
  if (isMoment(column)) {
    const moments = run.moments[level];
    return { value: moments?.[column] ?? null, reason: moments ? moments.reason : 'Not computed: the level is not complete, or the run is older than this figure.' };
  }
  const row = run.table[group.key]?.[level];
  return { value: row?.[column] ?? null, reason: row?.reason ?? null };
}

export interface ErrorTableProps {
  run: TableRun;
  shown: ReadonlySet<string>;
  /** Level the rule stands at. */
  current: number;
  /** A cell was chosen: its level and metric, for the note to be attached to. */
  onCell?: (anchor: string) => void;
  onLevel: (level: number) => void;
}

/** Range of the dot strip: decades around all draws and the trivial reconstruction. */
export function dotRange(rows: readonly LevelStatistics[], trivial: number | null): { low: number; high: number } {
  const values = rows.flatMap((row) => row.draws).filter((v): v is number => v !== null && v > 0);
  if (trivial) values.push(trivial);
  if (!values.length) return { low: 0.1, high: 10 };
  return { low: Math.min(...values) * 0.8, high: Math.max(...values) * 1.25 };
}

const print = (value: number | null, group: TableGroup): string =>
  value === null ? '–' : group.digits === 'one' ? (value * group.scale).toFixed(1) : group.digits === 'three' ? formatNumber(value) : formatError(value * group.scale);

const belowFloor = (axis: AxisView, run: TableRun, level: number): boolean => axis.isNoise && level < run.modelErrorFloor;

/** Errors by level of the axis: petrol shade by log error, brick hatch past the trivial reconstruction, corner for an outlier. */
export function ErrorTable({ run, shown, current, onCell, onLevel }: ErrorTableProps) {
  const axis = useAxis();
  const groups = tableGroups(run).filter((group) => group.key === fixedGroup || shown.has(group.key));
  const colour = solverLook(run.glyph).colour;
  return (
    <div className="sheet" style={{ overflowX: 'auto' }} tabIndex={0} role="region" aria-label="Error table, scrolls sideways">
      <table className="et" id="error-table">
        <thead>
          <tr className="grp">
            <td />
            {groups.map((group) => (
              <th key={group.key} scope="colgroup" colSpan={group.columns.length + (group.draws ? 1 : 0)} className="sep">{group.name}{group.unit ? `, ${group.unit}` : ''}</th>
            ))}
          </tr>
          <tr>
            <th scope="col" className="first">{axis.head}</th>
            {groups.flatMap((group) => [
              ...group.columns.map((column, i) => <th key={`${group.key}-${column}`} scope="col" className={clsx('num', i === 0 && 'sep')}>{columnNames[column]}</th>),
              ...(group.draws ? [<DotsHead key={`${group.key}-draws`} {...dotRange(run.table[group.key]!, run.trivial[group.key] ?? null)} />] : []),
            ])}
          </tr>
        </thead>
        <tbody>
          {run.ladder.map((level, i) => (
            <tr key={level} className={i === current ? 'cur' : undefined} aria-current={i === current ? 'true' : undefined}>
              <th scope="row" className="first tn">
                <button type="button" className="lnk quiet" onClick={() => onLevel(i)}>
                  <span className={belowFloor(axis, run, level) ? 'bf' : undefined}>{axis.format(level)}</span>
                  {belowFloor(axis, run, level) ? <span className="vh">, below the model-error floor</span> : null}
                </button>
              </th>
              {groups.flatMap((group) => levelCells({ axis, run, group, i, colour, onCell }))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function DotsHead({ low, high }: { low: number; high: number }) {
  return <th scope="col" className="dots">all draws<span className="ends"><i>{formatError(low)}</i><i>dashed: trivial</i><i>{formatError(high)}</i></span></th>;
}

function levelCells({ axis, run, group, i, colour, onCell }: { axis: AxisView; run: TableRun; group: TableGroup; i: number; colour: string; onCell?: (anchor: string) => void }) {
  const row = run.table[group.key]?.[i];
  const trivial = run.trivial[group.key] ?? null;
  const flagged = row ? outlier(row) : null;
  const shaded = group.key === fixedGroup;
  const cells = group.columns.map((column, k) => {
    const { value, reason } = cellValue(run, group, column, i);
    const past = trivial !== null && value !== null && column !== 'sd' && trivial > 0 && value >= trivial && group.key.endsWith('-error');
    const flag = shaded && column === 'worst' && flagged;
    const anchor = `${axis.format(run.ladder[i] ?? 0)}, ${group.name}, ${columnNames[column]}`;
    return (
      <td
        key={`${group.key}-${column}`}
        className={clsx('num', k === 0 && 'sep', flag && 'flag', past && shaded && 'past', past && !shaded && 'over')}
        style={shaded && !past && column !== 'sd' ? { background: `rgba(var(--heat), ${shade(value, trivial).toFixed(3)})` } : undefined}
        title={value === null ? (reason ?? 'not defined') : (isMoment(column) ? reason : null) ?? undefined}
      >
        {onCell ? <button type="button" className="lnk quiet" onClick={() => onCell(anchor)} aria-label={`${print(value, group)}, note on ${anchor}`}>{print(value, group)}</button> : print(value, group)}
        {flag ? <span className="vh">, draw {flag.draw + 1} lies {flag.deviations.toFixed(1)} standard deviations out</span> : null}
      </td>
    );
  });
  if (group.draws && row)
    cells.push(
      <td key={`${group.key}-draws`} className="dots">
        <DrawDots draws={row.draws} median={row.median} trivial={trivial} colour={colour} ring={flagged?.draw ?? null} {...dotRange(run.table[group.key]!, trivial)} />
      </td>,
    );
  return cells;
}

/** The phone's form: one disclosure a level, the rule's level open. */
export function ErrorLevels({ run, shown, current, onLevel }: ErrorTableProps) {
  const axis = useAxis();
  const groups = tableGroups(run).filter((group) => group.key === fixedGroup || shown.has(group.key));
  const rows = run.table[fixedGroup] ?? [];
  const trivial = run.trivial[fixedGroup] ?? null;
  const range = dotRange(rows, trivial);
  const colour = solverLook(run.glyph).colour;
  return (
    <div className="sheet">
      {rows.map((row, i) => {
        const flagged = outlier(row);
        const past = trivial !== null && row.mean !== null && row.mean >= trivial;
        return (
          <details key={row.level} className={clsx('lvl', i === current && 'cur')} open={i === current || undefined}>
            <summary onClick={() => onLevel(i)}>
              <b className={clsx('tn', belowFloor(axis, run, row.level) && 'bf')}>{axis.format(row.level)}</b>
              <DrawDots draws={row.draws} median={row.median} trivial={trivial} colour={colour} ring={flagged?.draw ?? null} width={150} {...range} />
              <span className={clsx('v tn', past && 'text-brick')}>{formatError(row.mean)}</span>
              <span className="ar" aria-hidden="true">›</span>
            </summary>
            <div className="in">
              {groups.map((group) => {
                return [
                  <div className="g" key={group.key}>{group.name}{group.unit ? `, ${group.unit}` : ''}{group.key === fixedGroup && flagged ? `, draw ${flagged.draw + 1} beyond 3 sd` : ''}</div>,
                  ...group.columns.map((column) => <div key={`${group.key}-${column}`}><span>{columnNames[column]}</span>{print(cellValue(run, group, column, i).value, group)}</div>),
                ];
              })}
            </div>
          </details>
        );
      })}
    </div>
  );
}
