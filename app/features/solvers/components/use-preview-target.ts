import { useMemo, useState } from 'react';
import { familyKeys, type FamilyKey } from '../../../../shared/domain/families';
import { usePreviewPhantom, usePublishedPhantoms } from '../api/bench-data';
import { previewPhantom } from '../model/preview-data';

export interface TargetPhantom {
  readonly slug: string;
  readonly version: number;
  readonly name: string;
}

/**
 * The phantom of a preview: one of those given (of a bench, of finished runs), or, where none is given, a published one of a family that the
 * reader chooses among those served.
 */
export function usePreviewTarget(given: readonly TargetPhantom[] | null, families: readonly FamilyKey[]) {
  const [slug, setSlug] = useState('');
  const [chosen, setFamily] = useState<FamilyKey | null>(null);
  const family = chosen && families.includes(chosen) ? chosen : (familyKeys.find((f) => families.includes(f)) ?? null);
  const published = usePublishedPhantoms(given === null ? family : null);
  const stock = (published.data?.items ?? []).filter((p) => !p.current.sealed).map((p) => ({ slug: p.slug, version: p.current.n, name: p.name }));
  const choices = given ?? stock;
  const target = choices.find((p) => p.slug === slug) ?? choices[0];
  const { detail, simulation } = usePreviewPhantom(target?.slug ?? '', target?.version ?? 0);
  const phantom = useMemo(() => (detail.data && simulation.data ? previewPhantom(detail.data, simulation.data) : null), [detail.data, simulation.data]);
  return {
    choices, target, phantom, choose: setSlug, error: detail.error ?? simulation.error, retry: () => void simulation.refetch(),
    /** Set where the reader chooses the family. */
    family: given === null ? { value: family, choose: setFamily, pending: published.isPending && family !== null } : null,
  };
}
export type PreviewTarget = ReturnType<typeof usePreviewTarget>;
