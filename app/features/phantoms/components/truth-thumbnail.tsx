import { useMemo } from 'react';
import { BodyImage } from '../../../components/images/body-image';
import { toPicture, valueScale } from '../../../components/images/pixels';
import { SealedDisc } from '../../../components/ui/notices';
import { decodeArray } from '../../../../shared/domain/array-encoding';
import { usePhantomSimulation } from '../api/get-phantom';

/** Small picture of a truth; a lock while it is sealed. */
export function TruthThumbnail({ slug, version, sealed, size = 44, label }: { slug: string; version: number; sealed: boolean; size?: number; label: string }) {
  if (sealed) return <SealedDisc size={size} />;
  return <OpenTruth slug={slug} version={version} size={size} label={label} />;
}

function OpenTruth({ slug, version, size, label }: { slug: string; version: number; size: number; label: string }) {
  const { data } = usePhantomSimulation(slug, version);
  const picture = useMemo(() => (data?.truth ? toPicture(decodeArray(data.truth), data.grid) : null), [data]);
  const [low, high] = valueScale(data?.truthRange ?? [0, 1], data?.background ?? 0.5);
  return <span className="thumb" style={{ width: size, display: 'block' }}><BodyImage label={label} picture={picture} body={data?.grid.body} low={low} high={high} /></span>;
}
