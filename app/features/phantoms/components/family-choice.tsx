import { familyKeys, familyNames } from '../../../../shared/domain/families';

/** The families with a registered forward problem. */
export function FamilyChoice() {
  return (
    <div className="fam4" role="radiogroup" aria-label="Problem family">
      {familyKeys.map((key) => (
        <label key={key}>
          <input type="radio" name="family" value={key} defaultChecked />
          <span>
            <b>{familyNames[key].name}</b>
            <span>{familyNames[key].line}</span>
          </span>
        </label>
      ))}
    </div>
  );
}
