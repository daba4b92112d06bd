import { familyNames, type FamilyKey } from '../../../../shared/domain/families';
import type { PreviewTarget } from './use-preview-target';

/** What the preview reconstructs: a phantom, and where the reader may choose it, its family. */
export function PreviewOn({ id, target, families, children }: { id: string; target: PreviewTarget; families: readonly FamilyKey[]; children?: React.ReactNode }) {
  const { family, choices } = target;
  if (!children && !family && choices.length < 2) return null;
  return (
    <div className="pvon">
      {family && families.length > 1 ? (
        <><label className="sm" htmlFor={`${id}-family`}>with</label><select className="t" id={`${id}-family`} value={family.value ?? ''} onChange={(e) => { const next = families.find((f) => f === e.target.value); if (next) family.choose(next); }}>{families.map((f) => <option key={f} value={f}>{familyNames[f].name}</option>)}</select></>
      ) : null}
      {choices.length > 1 ? (
        <><label className="sm" htmlFor={`${id}-phantom`}>on</label><select className="t" id={`${id}-phantom`} value={target.target?.slug ?? ''} onChange={(e) => target.choose(e.target.value)}>{choices.map((p) => <option key={p.slug} value={p.slug}>{p.name}</option>)}</select></>
      ) : target.target ? <span className="sm">on {target.target.name}</span> : null}
      {children}
    </div>
  );
}
