import { useState } from 'react';
import { Link } from 'react-router-dom';
import { BodyImage, type Place } from '../../../components/images/body-image';
import type { ElectrodeLayout } from '../../../components/images/electrode-layout';
import { valueAt, type Picture, type PixelGrid } from '../../../components/images/pixels';
import { SealedDisc } from '../../../components/ui/notices';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { formatError, formatNumber, formatSigned } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import { placeWords, unitAfter } from '../../../lib/problem-words';
import type { Contender } from '../model/comparison';

export interface MatrixColumn {
  contender: Contender;
  image: Picture | null;
  difference: Picture | null;
  l2: number | null;
  sup: number | null;
  /** Shown under the head while there is no image. */
  note: string;
}

export interface MatrixProps {
  phantom: { id: string; name: string; sealed: boolean };
  truth: Picture | null;
  columns: readonly MatrixColumn[];
  draw: number;
  low: number;
  high: number;
  /** Limit of the difference scale, common to all columns. */
  limit: number;
  grid: PixelGrid;
  unit: string;
  electrodes: ElectrodeLayout | null;
  /** Where the cross stands until it is moved. */
  start: Place;
}

const reading = (v: number): string => (Math.abs(v) >= 0.1 || v === 0 ? v.toFixed(2).replace('-', '\u2212') : formatNumber(v, 2));

/** Truth beside the reconstructions with their differences; one cross in all images and the values under it. */
export function Matrix({ phantom, truth, columns, draw, low, high, limit, grid, unit, electrodes, start }: MatrixProps) {
  const [moved, setCross] = useState<Place | null>(null);
  const cross = moved ?? start;
  const { body } = grid;
  const waiting = { picture: null, body, low: 0, high: 1, electrodes };
  const move = { cross, onCross: setCross, crossStep: grid.bodyRadius * 0.02 };
  const disc = { low, high, electrodes, ...move };
  const atTruth = truth ? valueAt(truth, cross.x, cross.y) : null;
  const values = columns.map((c) => (c.image ? valueAt(c.image, cross.x, cross.y) : null));
  const best = (pick: (c: MatrixColumn) => number | null): string | null => {
    const known = columns.filter((c) => pick(c) !== null);
    return known.length > 1 ? known.reduce((a, b) => ((pick(b) ?? Infinity) < (pick(a) ?? Infinity) ? b : a)).contender.id : null;
  };
  const bestL2 = best((c) => c.l2);
  const bestSup = best((c) => c.sup);
  return (
    <div className="sheet mat" style={{ '--columns': columns.length }}>
      <div>
        <h3>Truth <em>{phantom.id}</em></h3>
        {truth ? <BodyImage label={`Ground truth of ${phantom.name}`} picture={truth} {...disc} /> : phantom.sealed ? <SealedDisc size="100%" /> : <BodyImage label="The ground truth is being fetched" {...waiting} />}
        <p className="rowl" style={{ marginTop: 18 }}>At the mark, {placeWords(body, cross)}</p>
        <table className="xh">
          <caption className="vh">Values at the mark</caption>
          <thead><tr><th scope="col">{unit || <span className="vh">Of</span>}</th><th scope="col" className="num">value</th><th scope="col" className="num">off by</th></tr></thead>
          <tbody>
            {truth ? <tr><td>Truth</td><td className="num">{atTruth === null ? '\u2013' : reading(atTruth)}</td><td /></tr> : null}
            {columns.map((c, i) => {
              const v = values[i] ?? null;
              return (
                <tr key={c.contender.id}>
                  <td><span className="let">{c.contender.letter}</span> {c.contender.short}</td>
                  <td className="num">{v === null ? '\u2013' : reading(v)}</td>
                  <td className="num"><b>{v === null || atTruth === null ? '' : formatSigned(v - atTruth)}</b></td>
                </tr>
              );
            })}
          </tbody>
        </table>
        <p className="sm mu only-d" style={{ marginTop: 8 }}>Point at any {body?.kind === 'interval' ? 'curve' : 'image'}, or move the mark with the arrow keys.</p>
      </div>
      {columns.map((c, i) => (
        <div key={c.contender.id}>
          <h3><span className="let">{c.contender.letter}</span><SolverGlyph index={c.contender.glyph} size={16} /><Link to={paths.run(c.contender.id)} title={c.contender.name}>{c.contender.short}</Link><em>draw {draw + 1}</em></h3>
          <div className="pair">
            <div>
              <p className="rowl only-m">Reconstruction</p>
              {c.image ? <BodyImage label={`Reconstruction by ${c.contender.name}, draw ${draw + 1}`} picture={c.image} under={truth} {...disc} /> : <BodyImage label={c.note} {...waiting} />}
              {c.image ? null : <p className="sm">{c.note}</p>}
            </div>
            {c.difference ? (
              <div>
                <p className="rowl">Difference to truth</p>
                <BodyImage label={`Difference of ${c.contender.name} to the truth`} picture={c.difference} map="diverging" electrodes={electrodes} low={-limit} high={limit} {...move} />
              </div>
            ) : null}
          </div>
          <div className="rd">
            <span>relative L2<b className={c.contender.id === bestL2 ? 'w' : undefined}>{formatError(c.l2)}</b></span>
            <span>L∞{unitAfter(unit)}<b className={c.contender.id === bestSup ? 'w' : undefined}>{formatError(c.sup)}</b></span>
            <span>at the mark<b>{values[i] === null || values[i] === undefined ? '\u2013' : reading(values[i])}</b></span>
          </div>
        </div>
      ))}
    </div>
  );
}
