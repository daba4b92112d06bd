import { Field, Select } from '../../../components/ui/field';
import { FormSection } from '../../../components/ui/layout';
import { parseDecimal } from '../../../lib/decimal';
import { electrodeCounts, measurementKeys, patternKeys, type MeasurementKey, type PatternKey } from '../../../../shared/domain/geometry/electrical-impedance';
import { fieldId } from '../model/field-id';
import { geometryPath } from '../model/form-request';
import { electrodeWidth, frameFacts, measurementNames, patternNames } from '../model/geometry-facts';
import type { FormPart } from './form-part';

const g = geometryPath;

export function GeometrySection({ form, change, issueAt }: FormPart) {
  const facts = frameFacts(form.electrodes, form.pattern, form.measurement);
  const width = electrodeWidth(parseDecimal(form.radius), form.electrodes, parseDecimal(form.coverage) / 100);
  const setPattern = (pattern: PatternKey) =>
    // Trigonometric patterns drive every electrode, so none can be left out.
    change(pattern === 'trigonometric' && form.measurement === 'adjacent-undriven' ? { pattern, measurement: 'electrode-voltages' } : { pattern });
  const targets = form.shapes.every((s) => s.target) ? 'all' : form.shapes.some((s) => s.target) ? 'chosen' : 'none';
  return (
    <FormSection title="Geometry" fact={`${facts.values} values per frame, ${facts.independent} of them independent by reciprocity`} id="geometry">
      <div className="g3">
        <Field id={fieldId(`${g}.body.radius`)} label="Body radius" unit="mm" inputMode="decimal" value={form.radius} error={issueAt(`${g}.body.radius`)} help="A disc." onChange={(e) => change({ radius: e.target.value })} />
        <Select id={fieldId(`${g}.electrodes`)} label="Electrodes" value={form.electrodes} error={issueAt(`${g}.electrodes`)} help="Even spacing." onChange={(e) => change({ electrodes: electrodeCounts.find((n) => String(n) === e.target.value) ?? 16 })}>
          {electrodeCounts.map((n) => <option key={n} value={n}>{n}</option>)}
        </Select>
        <Field id={fieldId(`${g}.electrodeCoverage`)} label="Electrode width" unit="% of edge" inputMode="decimal" value={form.coverage} error={issueAt(`${g}.electrodeCoverage`)} help={Number.isFinite(width) ? `${width.toFixed(1)} mm each.` : 'Share of the edge under all electrodes.'} onChange={(e) => change({ coverage: e.target.value })} />
        <Field id={fieldId(`${g}.firstElectrodeDeg`)} label="Electrode 1 stands at" unit="°" inputMode="decimal" value={form.firstElectrodeDeg} error={issueAt(`${g}.firstElectrodeDeg`)} help="From the x axis, counter-clockwise; 90 is the top." onChange={(e) => change({ firstElectrodeDeg: e.target.value })} />
        <Select id={fieldId(`${g}.numbering`)} label="Numbered" value={form.numbering} onChange={(e) => change({ numbering: e.target.value === 'clockwise' ? 'clockwise' : 'counter-clockwise' })} help="Direction in which the numbers rise.">
          <option value="clockwise">clockwise</option>
          <option value="counter-clockwise">counter-clockwise</option>
        </Select>
        <Field id={fieldId(`${g}.contactImpedance`)} label="Contact impedance" unit="Ω m²" inputMode="decimal" value={form.contactImpedance} error={issueAt(`${g}.contactImpedance`)} help="One value for every electrode." onChange={(e) => change({ contactImpedance: e.target.value })} />
        <Select id={fieldId(`${g}.pattern`)} label="Current pattern" value={form.pattern} error={issueAt(`${g}.pattern`)} help={`${facts.patterns} patterns.`} onChange={(e) => setPattern(patternKeys.find((k) => k === e.target.value) ?? 'adjacent')}>
          {patternKeys.map((k) => <option key={k} value={k}>{patternNames[k]}</option>)}
        </Select>
        <Field id={fieldId(`${g}.current`)} label="Current" unit="mA/m" inputMode="decimal" value={form.current} error={issueAt(`${g}.current`)} help="Amplitude per metre of electrode height: the model is two-dimensional." onChange={(e) => change({ current: e.target.value })} />
        <Select id={fieldId(`${g}.measurement`)} label="Measured between" value={form.measurement} error={issueAt(`${g}.measurement`)} help={`${facts.valuesPerPattern} values for each pattern.`} onChange={(e) => change({ measurement: measurementKeys.find((k) => k === e.target.value) ?? 'adjacent-all' })}>
          {measurementKeys.filter((k: MeasurementKey) => !(k === 'adjacent-undriven' && form.pattern === 'trigonometric')).map((k) => <option key={k} value={k}>{measurementNames[k]}</option>)}
        </Select>
        <Select id={fieldId('definition.dataKind')} label="Data" value={form.dataKind} error={issueAt('definition.dataKind')} help={form.dataKind === 'difference' ? 'The reference frame comes from the same mesh.' : 'The voltages as they are, without a reference.'} onChange={(e) => change(e.target.value === 'absolute' ? { dataKind: 'absolute', noiseReference: 'voltages' } : { dataKind: 'difference' })}>
          <option value="difference">Difference to the background</option>
          <option value="absolute">Absolute</option>
        </Select>
        <Select id={fieldId('definition.noiseReference')} label="Noise is relative to" value={form.noiseReference} error={issueAt('definition.noiseReference')} help="Said beside every noise reading." onChange={(e) => change({ noiseReference: e.target.value === 'difference' ? 'difference' : 'voltages' })}>
          <option value="voltages">the raw voltages</option>
          {form.dataKind === 'difference' ? <option value="difference">the difference signal</option> : null}
        </Select>
        {form.truthKind === 'shapes' ? (
          <Select
            label="Targets" value={targets} help="Needed for position, resolution and amplitude."
            onChange={(e) => change({ shapes: form.shapes.map((s, i) => ({ ...s, target: e.target.value === 'all' ? true : e.target.value === 'none' ? false : i === 0 ? true : s.target && form.shapes.some((o) => !o.target) })) })}
          >
            <option value="all">every shape above</option>
            <option value="chosen">the shapes ticked above</option>
            <option value="none">none</option>
          </Select>
        ) : (
          <Select label="Targets" value="none" disabled help="Only shapes declare targets; position error is not scored here.">
            <option value="none">none</option>
          </Select>
        )}
      </div>
    </FormSection>
  );
}
