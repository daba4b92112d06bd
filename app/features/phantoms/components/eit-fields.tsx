import { Field, Select, Textarea } from '../../../components/ui/field';
import { parseDecimal } from '../../../lib/decimal';
import { electrodeCounts, measurementKeys, patternKeys, type PatternKey } from '../../../../shared/domain/geometry/electrical-impedance';
import { starOutline } from '../../../../shared/domain/star-outline';
import { fieldId } from '../model/field-id';
import type { EitDraft } from '../model/form-drafts';
import { geometryPath, parseNumbers } from '../model/form-issue';
import { eitFrameFacts, electrodeCount } from '../model/geometry/electrical-impedance';
import { electrodeWidth, measurementNames, patternNames } from '../model/geometry-facts';
import type { FormPart } from './form-part';

const g = geometryPath;

/** Perimeter, mm; NaN while the outline cannot be read. */
function perimeter(draft: EitDraft): number {
  const numbers = (text: string): number[] => parseNumbers(text);
  const outline = draft.outline === 'disc' ? starOutline([], []) : starOutline(numbers(draft.cosine), numbers(draft.sine));
  return parseDecimal(draft.radius) * outline.length;
}

const patternHelp: Record<PatternKey, string> = {
  adjacent: 'in at one electrode, out at the next', skip: 'in at one, out some electrodes on', opposite: 'in at one, out at the opposite one', trigonometric: 'cosines and sines on all electrodes', listed: 'as typed below',
};

export function EitFields({ form, change, issueAt }: FormPart) {
  const { eit } = form;
  const set = (patch: Partial<EitDraft>) => change((old) => ({ eit: { ...old.eit, ...patch } }));
  const field = (path: string) => ({ id: fieldId(`${g}.${path}`), error: issueAt(`${g}.${path}`) });
  const facts = eitFrameFacts(eit);
  const count = electrodeCount(eit);
  const width = electrodeWidth(perimeter(eit), count, parseDecimal(eit.coverage) / 100);
  const setPattern = (pattern: PatternKey) =>
    // Trigonometric patterns drive every electrode, so none can be left out.
    set(pattern === 'trigonometric' && eit.measurement === 'adjacent-undriven' ? { pattern, measurement: 'electrode-voltages' } : { pattern });
  return (
    <>
      <Select label="Outline" value={eit.outline} help={eit.outline === 'disc' ? 'A disc.' : 'r(θ) = radius (1 + Σ aₖ cos kθ + bₖ sin kθ).'} onChange={(e) => set({ outline: e.target.value === 'star' ? 'star' : 'disc' })}>
        <option value="disc">disc</option>
        <option value="star">smooth curve r(θ)</option>
      </Select>
      <Field {...field('body.radius')} label="Body radius" unit="mm" inputMode="decimal" value={eit.radius} help={eit.outline === 'disc' ? 'Half the diameter.' : 'Mean radius of the curve.'} onChange={(e) => set({ radius: e.target.value })} />
      {eit.outline === 'star' ? (
        <>
          <Field {...field('body.cosine')} label="Cosine coefficients a₁, a₂, …" value={eit.cosine} help="Up to eight, each from −0.5 to 0.5." onChange={(e) => set({ cosine: e.target.value })} />
          <Field {...field('body.sine')} label="Sine coefficients b₁, b₂, …" value={eit.sine} help="Up to eight; may be left empty." onChange={(e) => set({ sine: e.target.value })} />
        </>
      ) : null}
      <Field {...field('electrodes')} label="Electrodes" inputMode="numeric" list="electrode-counts" value={eit.electrodes} help="An even number from 8 to 64." onChange={(e) => set({ electrodes: e.target.value })} />
      <datalist id="electrode-counts">{electrodeCounts.map((n) => <option key={n} value={n} />)}</datalist>
      <Field {...field('electrodeCoverage')} label="Electrode width" unit="% of edge" inputMode="decimal" value={eit.coverage} help={Number.isFinite(width) ? `${width.toFixed(1)} mm each.` : 'Share of the edge under all electrodes.'} onChange={(e) => set({ coverage: e.target.value })} />
      <Select label="Placed" value={eit.placing} help={eit.placing === 'even' ? 'Equal steps along the edge.' : 'Polar angles about the middle.'} onChange={(e) => set({ placing: e.target.value === 'listed' ? 'listed' : 'even' })}>
        <option value="even">evenly</option>
        <option value="listed">at listed angles</option>
      </Select>
      {eit.placing === 'even' ? (
        <Field {...field('firstElectrodeDeg')} label="Electrode 1 stands at" unit="°" inputMode="decimal" value={eit.firstElectrodeDeg} help="From the x axis, counter-clockwise; 90 is the top." onChange={(e) => set({ firstElectrodeDeg: e.target.value })} />
      ) : (
        <Textarea {...field('electrodeAnglesDeg')} className="code span-all" label={`Angles of the ${count} electrodes, °`} rows={2} spellCheck={false} value={eit.angles} help="Once round, in the direction of the numbering, separated by spaces." onChange={(e) => set({ angles: e.target.value })} />
      )}
      <Select label="Numbered" value={eit.numbering} onChange={(e) => set({ numbering: e.target.value === 'clockwise' ? 'clockwise' : 'counter-clockwise' })} help="Direction in which the numbers rise.">
        <option value="clockwise">clockwise</option>
        <option value="counter-clockwise">counter-clockwise</option>
      </Select>
      <Select label="Contact impedance is" value={eit.contacts} help="Of the layer under each electrode." onChange={(e) => set({ contacts: e.target.value === 'each' ? 'each' : 'one', ...(e.target.value === 'each' && !eit.contactImpedances.trim() ? { contactImpedances: Array.from({ length: count }, () => eit.contactImpedance).join(' ') } : {}) })}>
        <option value="one">the same everywhere</option>
        <option value="each">one value an electrode</option>
      </Select>
      {eit.contacts === 'one' ? (
        <Field {...field('contactImpedance')} label="Contact impedance" unit="Ω m²" inputMode="decimal" value={eit.contactImpedance} help="One value for every electrode." onChange={(e) => set({ contactImpedance: e.target.value })} />
      ) : (
        <Textarea {...field('contactImpedance')} className="code span-all" label={`Contact impedances of the ${count} electrodes, Ω m²`} rows={2} spellCheck={false} value={eit.contactImpedances} help="In the order of the numbers, separated by spaces." onChange={(e) => set({ contactImpedances: e.target.value })} />
      )}
      <Select {...field('pattern')} label="Current pattern" value={eit.pattern} help={`${facts.patterns} patterns: ${patternHelp[eit.pattern]}.`} onChange={(e) => setPattern(patternKeys.find((k) => k === e.target.value) ?? 'adjacent')}>
        {patternKeys.map((k) => <option key={k} value={k}>{patternNames[k]}</option>)}
      </Select>
      {eit.pattern === 'skip' ? <Field {...field('skip')} label="Electrodes skipped" inputMode="numeric" value={eit.skip} help={`Between the driven ones, 1 to ${count / 2 - 2}.`} onChange={(e) => set({ skip: e.target.value })} /> : null}
      {eit.pattern === 'listed' ? (
        <Textarea {...field('currents')} className="code span-all" label={`Currents on the ${count} electrodes, one line a pattern`} rows={5} spellCheck={false} value={eit.currents} help="Multiples of the current below; each line sums to zero." onChange={(e) => set({ currents: e.target.value })} />
      ) : null}
      <Field {...field('current')} label="Current" unit="mA/m" inputMode="decimal" value={eit.current} help="Amplitude per metre of electrode height: the model is two-dimensional." onChange={(e) => set({ current: e.target.value })} />
      <Select {...field('measurement')} label="Measured between" value={eit.measurement} help={facts.patterns ? `${facts.valuesPerPattern} values for each pattern.` : 'Values of each pattern.'} onChange={(e) => set({ measurement: measurementKeys.find((k) => k === e.target.value) ?? 'adjacent-all' })}>
        {measurementKeys.filter((k) => !(k === 'adjacent-undriven' && eit.pattern === 'trigonometric')).map((k) => <option key={k} value={k}>{measurementNames[k]}</option>)}
      </Select>
      <Select id={fieldId('definition.dataKind')} label="Data" value={form.dataKind} error={issueAt('definition.dataKind')} help={form.dataKind === 'difference' ? 'The reference frame comes from the same mesh.' : 'The voltages as they are, without a reference.'} onChange={(e) => change(e.target.value === 'absolute' ? { dataKind: 'absolute', noiseReference: 'voltages' } : { dataKind: 'difference' })}>
        <option value="difference">Difference to the background</option>
        <option value="absolute">Absolute</option>
      </Select>
      <Select id={fieldId('definition.noiseReference')} label="Noise is relative to" value={form.noiseReference} error={issueAt('definition.noiseReference')} help="Said beside every noise reading." onChange={(e) => change({ noiseReference: e.target.value === 'difference' ? 'difference' : 'voltages' })}>
        <option value="voltages">the raw voltages</option>
        {form.dataKind === 'difference' ? <option value="difference">the difference signal</option> : null}
      </Select>
    </>
  );
}
