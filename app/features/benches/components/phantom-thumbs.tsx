import { Link } from 'react-router-dom';
import type { BenchDetail } from '../../../../shared/contracts/benches';
import { DiscImage } from '../../../components/images/disc-image';
import { rangeOf, type Picture } from '../../../components/images/pixels';
import { SealedDisc } from '../../../components/ui/notices';
import { paths } from '../../../lib/paths';

/** The phantoms of a bench, small: truth, name, open or sealed. */
export function PhantomThumbs({ phantoms, pictures }: { phantoms: BenchDetail['phantoms']; pictures: ReadonlyMap<string, Picture> }) {
  return (
    <div className="phs">
      {phantoms.map((p) => {
        const picture = pictures.get(p.slug) ?? null;
        const [low, high] = picture ? rangeOf([picture]) : [0, 1];
        return (
          <Link key={p.slug} className="ph" to={paths.phantomVersion(p.slug, p.version)}>
            {p.sealed ? <SealedDisc /> : <DiscImage label={`Ground truth of ${p.name}`} picture={picture} low={low} high={high === low ? low + 1 : high} size={62} />}
            <div><b>{p.name}</b><span>{p.id}, {p.sealed ? 'sealed' : 'open'}</span></div>
          </Link>
        );
      })}
    </div>
  );
}
