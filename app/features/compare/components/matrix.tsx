import { useState } from 'react';
import { Link } from 'react-router-dom';
import { DiscImage, type ElectrodeLayout, type Place } from '../../../components/images/disc-image';
import { valueAt, type Picture } from '../../../components/images/pixels';
import { SealedDisc } from '../../../components/ui/notices';
import { SolverGlyph } from '../../../components/ui/solver-glyph';
import { formatError, formatSigned } from '../../../lib/format';
import { paths } from '../../../lib/paths';
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
  radius: number;
  unit: string;
  electrodes: ElectrodeLayout;
  /** Where the cross stands until it is moved. */
  start: Place;
}

const millimetres = (v: number): string => `${formatSigned(v * 1000, 0).replace('+', '')} mm`;

/** Truth beside the reconstructions with their differences; one cross in all images and the values under it. */
export function Matrix({ phantom, truth, columns, draw, low, high, limit, radius, unit, electrodes, start }: MatrixProps) {
  const [moved, setCross] = useState<Place | null>(null);
  const cross = moved ?? start;
  const disc = { low, high, electrodes, cross, onCross: setCross, crossStep: radius * 0.02 };
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
        {truth ? <DiscImage label={`Ground truth of ${phantom.name}`} picture={truth} {...disc} /> : phantom.sealed ? <SealedDisc size="100%" /> : <DiscImage label="The ground truth is being fetched" picture={null} low={0} high={1} electrodes={electrodes} />}
        <p className="rowl" style={{ marginTop: 18 }}>At the mark, x {millimetres(cross.x)}, y {millimetres(cross.y)}</p>
        <table className="xh">
          <caption className="vh">Values at the mark</caption>
          <thead><tr><th scope="col">{unit}</th><th scope="col" className="num">value</th><th scope="col" className="num">off by</th></tr></thead>
          <tbody>
            {truth ? <tr><td>Truth</td><td className="num">{atTruth === null ? '\u2013' : atTruth.toFixed(2)}</td><td /></tr> : null}
            {columns.map((c, i) => {
              const v = values[i] ?? null;
              return (
                <tr key={c.contender.id}>
                  <td><span className="let">{c.contender.letter}</span> {c.contender.short}</td>
                  <td className="num">{v === null ? '\u2013' : v.toFixed(2)}</td>
                  <td className="num"><b>{v === null || atTruth === null ? '' : formatSigned(v - atTruth)}</b></td>
                </tr>
              );
            })}
          </tbody>
        </table>
        <p className="sm mu only-d" style={{ marginTop: 8 }}>Point at any image, or move the mark with the arrow keys.</p>
      </div>
      {columns.map((c, i) => (
        <div key={c.contender.id}>
          <h3><span className="let">{c.contender.letter}</span><SolverGlyph index={c.contender.glyph} size={16} /><Link to={paths.run(c.contender.id)} title={c.contender.name}>{c.contender.short}</Link><em>draw {draw + 1}</em></h3>
          <div className="pair">
            <div>
              <p className="rowl only-m">Reconstruction</p>
              {c.image ? <DiscImage label={`Reconstruction by ${c.contender.name}, draw ${draw + 1}`} picture={c.image} {...disc} /> : <DiscImage label={c.note} picture={null} low={0} high={1} electrodes={electrodes} />}
              {c.image ? null : <p className="sm">{c.note}</p>}
            </div>
            {c.difference ? (
              <div>
                <p className="rowl">Difference to truth</p>
                <DiscImage label={`Difference of ${c.contender.name} to the truth`} picture={c.difference} map="diverging" electrodes={electrodes} low={-limit} high={limit} cross={cross} onCross={setCross} crossStep={radius * 0.02} />
              </div>
            ) : null}
          </div>
          <div className="rd">
            <span>relative L2<b className={c.contender.id === bestL2 ? 'w' : undefined}>{formatError(c.l2)}</b></span>
            <span>L∞, {unit}<b className={c.contender.id === bestSup ? 'w' : undefined}>{formatError(c.sup)}</b></span>
            <span>at the mark<b>{values[i] === null || values[i] === undefined ? '\u2013' : values[i]?.toFixed(2)}</b></span>
          </div>
        </div>
      ))}
    </div>
  );
}
