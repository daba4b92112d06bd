import { familyKeys, familyNames, type FamilyKey } from '../../../../shared/domain/families';

/** Which kind of problem the phantom belongs to; a version keeps the family of its phantom. */
export function FamilyChoice({ value, onChange, fixed }: { value: FamilyKey; onChange: (family: FamilyKey) => void; fixed: boolean }) {
  return (
    <div className="fam4" role="radiogroup" aria-label="Problem family">
      {familyKeys.map((key) => (
        <label key={key}>
          <input type="radio" name="family" value={key} checked={key === value} disabled={fixed && key !== value} onChange={() => onChange(key)} />
          <span>
            <b>{familyNames[key].name}</b>
            <span>{familyNames[key].line}</span>
          </span>
        </label>
      ))}
    </div>
  );
}
