import clsx from 'clsx';
import type { ReactNode } from 'react';
import { Seal } from './seal';
import { StateMark, type MarkState } from './state-mark';
import { formatHash } from '../../lib/format';

/** The list form of the certificate: name and how, reading in serif, state. */
export function CheckRow({ name, how, reading, state, word }: { name: ReactNode; how?: ReactNode; reading?: ReactNode; state: MarkState; word?: ReactNode }) {
  return (
    <div className="chk">
      <span>{name}{how ? <em>{how}</em> : null}</span>
      <span className="r">{reading}</span>
      <StateMark state={state} word={word} />
    </div>
  );
}

export interface CertificateCell {
  name: string;
  state: MarkState;
  word?: string;
  reading: ReactNode;
  meaning: ReactNode;
}

/** Double frame, one cell a check, the seal last. */
export function CertificateStrip({ cells, hash, sealNote, className }: { cells: readonly CertificateCell[]; hash?: string | null; sealNote?: ReactNode; className?: string }) {
  const count = cells.length + (hash ? 1 : 0);
  // Two even rows where one would be too tight.
  const columns = count <= 6 ? count : Math.ceil(count / 2);
  return (
    <div className={clsx('cert', className)} style={{ '--columns': columns }}>
      {cells.map((c) => (
        <div key={c.name}>
          <h4>{c.name}</h4>
          <div className="v">{c.reading}</div>
          <StateMark state={c.state} word={c.word} />
          <p>{c.meaning}</p>
        </div>
      ))}
      {hash ? (
        <div className="flex gap-x3 items-center">
          <Seal hash={hash} size={64} />
          <div>
            <h4>Seal</h4>
            <p className="mono">{formatHash(hash)}</p>
            {sealNote ? <p>{sealNote}</p> : null}
          </div>
        </div>
      ) : null}
    </div>
  );
}
