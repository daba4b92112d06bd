import { useMemo } from 'react';
import { Button, TextButton } from '../../../components/ui/button';
import { useToast } from '../../../components/ui/toast';
import { formatBytes } from '../../../lib/format';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { licenceNames } from '../model/licences';
import { citation } from '../model/phantom-facts';
import { caution, phantomFiles } from '../model/phantom-files';

export function Citation({ detail }: { detail: PhantomDetail }) {
  const toast = useToast();
  const c = citation(detail);
  const text = `${c.group} (${c.year}). ${c.title}, ${c.rest} SHA-256 ${detail.version.contentHash}.`;
  const copy = () => {
    navigator.clipboard.writeText(text).then(() => toast('Citation copied.'), () => toast('The browser did not allow copying. Mark the text and copy it.'));
  };
  return (
    <>
      <div className="sh" id="cite"><h2>Licence and citation</h2></div>
      <div className="sheet">
        <div className="cite">{c.group} ({c.year}). <i>{c.title}</i>, {c.rest}</div>
        <div className="citerow"><span className="sm">{licenceNames[detail.version.licence].line}</span><Button onClick={copy}>Copy</Button></div>
      </div>
    </>
  );
}

export function Downloads({ detail, simulation }: { detail: PhantomDetail; simulation: Simulation | undefined }) {
  const files = useMemo(() => (simulation ? phantomFiles(detail, simulation) : []), [detail, simulation]);
  return (
    <>
      <div className="sh gap-top" id="download"><h2>Download</h2><p>version {detail.version.n}</p></div>
      <div className="sheet">
        {files.map((file) => (
          <div className="dlrow" key={file.name}><span>{file.name}<em>{file.line}</em></span><span className="tn mu">{formatBytes(file.bytes)}</span><TextButton aria-label={`Download ${file.name}`} onClick={file.save}>Download</TextButton></div>
        ))}
        {files.length === 0 ? <p className="sm pad">The files appear with the simulated data.</p> : null}
      </div>
      <p className="sm" style={{ marginTop: 8 }}>{caution}</p>
    </>
  );
}
