import { Link } from 'react-router-dom';
import type { BenchDetail } from '../../../../shared/contracts/benches';
import { BodyImage } from '../../../components/images/body-image';
import { rangeOf, valueScale, type Picture } from '../../../components/images/pixels';
import { SealedDisc } from '../../../components/ui/notices';
import { paths } from '../../../lib/paths';

export interface PhantomPicture {
  readonly picture: Picture;
  readonly background: number;
}

/** The phantoms of a bench, small: truth, name, open or sealed. */
export function PhantomThumbs({ phantoms, pictures }: { phantoms: BenchDetail['phantoms']; pictures: ReadonlyMap<string, PhantomPicture> }) {
  return (
    <div className="phs">
      {phantoms.map((p) => {
        const known = pictures.get(p.slug);
        const [low, high] = known ? valueScale(rangeOf([known.picture]), known.background) : [0, 1];
        return (
          <Link key={p.slug} className="ph" to={paths.phantomVersion(p.slug, p.version)}>
            {p.sealed ? <SealedDisc /> : <BodyImage label={`Ground truth of ${p.name}`} picture={known?.picture ?? null} low={low} high={high} size={62} />}
            <div><b>{p.name}</b><span>{p.id}, {p.sealed ? 'sealed' : 'open'}</span></div>
          </Link>
        );
      })}
    </div>
  );
}
