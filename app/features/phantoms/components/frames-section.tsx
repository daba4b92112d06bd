import { z } from 'zod';
import { Box } from '../../../components/ui/box';
import { Button } from '../../../components/ui/button';
import { Checkbox, Field, Option } from '../../../components/ui/field';
import { FormSection } from '../../../components/ui/layout';
import { StateShape } from '../../../components/ui/state-mark';
import { isApiError } from '../../../lib/api-client';
import { formatBytes, formatHash, formatNumber, formatQuantity } from '../../../lib/format';
import { useUploadFrames } from '../api/upload-files';
import { fieldId } from '../model/field-id';
import { framesLocked } from '../model/form-request';
import { familyNames } from '../../../../shared/domain/families';
import { valuesPerFrame } from '../model/form-geometry';
import type { FormPart } from './form-part';

/** Measured frames beside the simulated data. The statement comes before the file: without it the upload is locked. */
export function FramesSection({ form, change, issueAt }: FormPart) {
  const upload = useUploadFrames();
  const values = valuesPerFrame(form);
  const impedance = form.family === 'electrical-impedance';
  const { dataUnit } = familyNames[form.family];
  const inUnit = `${Number.isFinite(values) ? values : ''} values${dataUnit ? ` in ${dataUnit}` : ''}`;
  const locked = framesLocked(form);
  const origin = (framesOrigin: typeof form.framesOrigin) => ({ name: 'frames-origin', checked: form.framesOrigin === framesOrigin, onChange: () => change({ framesOrigin }) });
  const choose = (file: File | undefined) => {
    if (file) upload.mutate({ file, valuesPerFrame: values }, { onSuccess: (frames) => change({ frames }) });
  };
  return (
    <FormSection title="Measured frames" fact="optional, beside the simulated data" id="frames">
      <div className="g2">
        <fieldset className="sheet" style={{ margin: 0, padding: 0, alignSelf: 'start' }}>
          <legend className="vh">Measured frames</legend>
          <Option title="None" {...origin('none')}>Only simulated data.</Option>
          <Option title="On a tank, plant or sample" {...origin('tank')}>Say what was measured, and with which instrument.</Option>
          <Option title="On people or animals" {...origin('living')}>Uploading stays locked until the box is complete.</Option>
        </fieldset>
        {form.framesOrigin === 'none' ? (
          <p className="sm">A table of numbers (CSV), one row a frame of {inUnit}, the reference frame first.</p>
        ) : (
          <div>
            {form.framesOrigin === 'living' ? (
              <Box tone="caution" title="Before you upload data measured on people or animals">
                <p>Results here are about methods, not about patients. They are not for diagnosis and are no safety case. {impedance ? 'Injecting current' : 'Measuring'} is bound by the applicable {impedance ? 'electrical-safety' : 'safety'} standard (IEC 60601-1 and local rules) and the judgement of licensed practitioners.</p>
                <div style={{ padding: '8px 0 6px' }}>
                  <Checkbox checked={form.ethicsApproved} error={issueAt('frames.ethicsApproved')} onChange={(e) => change({ ethicsApproved: e.target.checked })}>Ethics approval is held and its reference is given below.</Checkbox>
                  <Checkbox checked={form.deidentified} error={issueAt('frames.deidentified')} onChange={(e) => change({ deidentified: e.target.checked })}>The frames are de-identified: no name, date, face or record number.</Checkbox>
                  <Checkbox checked={form.currentWithinStandard} error={issueAt('frames.currentWithinStandard')} onChange={(e) => change({ currentWithinStandard: e.target.checked })}>{impedance ? 'Current stayed within the applicable electrical-safety standard' : 'The measurement stayed within the applicable safety standard'}, under a licensed practitioner.</Checkbox>
                </div>
                <Field id={fieldId('frames.ethicsReference')} label="Ethics reference" placeholder="Board and number" maxLength={200} value={form.ethicsReference} error={issueAt('frames.ethicsReference')} onChange={(e) => change({ ethicsReference: e.target.value })} />
              </Box>
            ) : (
              <Box tone="caution" title="Before you upload measured data">
                <p>Results here are about methods, not about plant. They are no safety case.</p>
                <Field id={fieldId('frames.instrument')} label="What was measured, with which instrument" placeholder={impedance ? 'Saline tank, 16-channel voltmeter' : 'Sample holder, flat-panel detector'} maxLength={300} value={form.instrument} error={issueAt('frames.instrument')} onChange={(e) => change({ instrument: e.target.value })} />
              </Box>
            )}
            <div className="framefile">
              <label className="btn" aria-disabled={locked || upload.isPending}>
                <input id={fieldId('frames.sha256')} className="vh" type="file" accept=".csv,text/csv,text/plain" disabled={locked || upload.isPending} onChange={(e) => { choose(e.target.files?.[0]); e.target.value = ''; }} />
                {upload.isPending ? 'Reading the file' : form.frames ? 'Choose another file' : 'Choose a CSV file'}
              </label>
              <span className="sm">{locked ? 'Locked until the box above is complete.' : `One row a frame, ${inUnit}, the reference first.`}</span>
            </div>
            {form.frames ? (
              <div className="sheet found" style={{ marginTop: 10 }}>
                <b className="mono">{form.frames.fileName || 'stored frames'}</b>
                <p className="sm">
                  {form.frames.frames} frames of {form.frames.valuesPerFrame} values{form.frames.fileSize ? `, ${formatBytes(form.frames.fileSize)}` : ''}. Hash {formatHash(form.frames.sha256)}
                  {form.frames.largestChange > 0 ? `. Norm of the largest change ${dataUnit ? formatQuantity(form.frames.largestChange, dataUnit, 2) : formatNumber(form.frames.largestChange, 2)}` : ''}
                </p>
                <Button onClick={() => change({ frames: null })}>Remove the frames</Button>
              </div>
            ) : null}
            {upload.isError ? <UploadFault error={upload.error} /> : null}
            {!upload.isError && issueAt('frames.sha256') ? <span className="fld err"><span className="help"><StateShape state="fail" />{issueAt('frames.sha256')}</span></span> : null}
          </div>
        )}
      </div>
    </FormSection>
  );
}

const around = z.object({ row: z.int(), column: z.int(), neighbours: z.object({ fromRow: z.int(), fromColumn: z.int(), cells: z.array(z.array(z.string())) }) });

/** The place of a fault in front of its words, unless they name it already. */
function placed(issue: { message: string; row?: number; column?: number }): string {
  const named = /^row /i.test(issue.message) && (issue.column === undefined || issue.message.includes(`column ${issue.column}`));
  if (issue.row === undefined || named) return issue.message;
  return `Row ${issue.row}${issue.column === undefined ? '' : `, column ${issue.column}`}: ${issue.message}`;
}

/** A refused file: the first cell at fault with its row and column among its neighbours, then the others. */
export function UploadFault({ error }: { error: unknown }) {
  const issues = isApiError(error) ? error.issues : [];
  const first = issues[0];
  const title = first ? placed(first) : error instanceof Error ? error.message : 'The file cannot be used';
  const cells = around.safeParse(isApiError(error) ? error.extra : undefined);
  return (
    <Box tone="failure" title={title} alert className="fault">
      {cells.success ? <FaultCells {...cells.data} /> : null}
      {first && isApiError(error) && error.message !== first.message && !title.includes(error.message) ? <p>{error.message}</p> : null}
      {issues.length > 1 ? <ul>{issues.slice(1, 6).map((issue, i) => <li key={i}>{placed(issue)}</li>)}</ul> : null}
      <p>Correct the file and choose it again. Nothing was stored.</p>
    </Box>
  );
}

function FaultCells({ row, column, neighbours: { fromRow, fromColumn, cells } }: z.infer<typeof around>) {
  return (
    <div className="peekbox">
      <table className="peekc">
        <caption className="vh">The cell among its neighbours</caption>
        <thead><tr><td />{cells[0]?.map((_, j) => <th key={j} scope="col">{fromColumn + j}</th>)}</tr></thead>
        <tbody>
          {cells.map((line, i) => (
            <tr key={i}><th scope="row">{fromRow + i}</th>{line.map((cell, j) => <td key={j} className={fromRow + i === row && fromColumn + j === column ? 'bad' : undefined}>{cell || '(empty)'}</td>)}</tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
