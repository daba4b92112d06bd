import { Button } from '../../../components/ui/button';
import { useToast } from '../../../components/ui/toast';
import { apiUrl } from '../../../lib/api-client';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { familyNames } from '../../../../shared/domain/families';
import { defaultDraws, defaultLadder } from '../../../../shared/domain/ladder';
import { versionPath } from '../api/get-phantom';
import { licenceNames } from '../model/licences';
import { citation } from '../model/phantom-facts';

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

interface VersionFile {
  readonly file: string;
  readonly name: string;
  readonly line: string;
}

/** What the server makes of a version; the truth only where the reader may see it. */
function versionFiles(detail: PhantomDetail, simulation: Simulation | undefined): VersionFile[] {
  const impedance = detail.family === 'electrical-impedance';
  const { dataName, valueName, valueUnit } = familyNames[detail.family];
  const rows = simulation ? `${simulation.frame.length} rows` : 'one row a value';
  return [
    ...(detail.version.definition.truth ? [{ file: 'truth.npy', name: simulation ? simulation.grid.ny === 1 ? `Ground truth on ${simulation.grid.nx} cells` : `Ground truth on a ${simulation.grid.nx} grid` : 'Ground truth', line: 'array file, double' }] : []),
    { file: 'definition.json', name: impedance ? 'Definition with electrodes' : 'Definition', line: `text, lengths in m${valueUnit ? `, ${valueName} in ${valueUnit}` : ''}` },
    { file: impedance ? 'voltages.csv' : 'data.csv', name: `Noise-free ${dataName}`, line: `table, ${rows}` },
    { file: 'noisy-frames.npy', name: `All ${defaultLadder.length * defaultDraws} noisy frames`, line: 'array file, double; level, draw, value' },
    ...(detail.version.frames ? [{ file: 'frames.csv', name: 'Measured frames', line: `table, ${detail.version.frames.frames} rows` }] : []),
    { file: 'README.txt', name: 'Read me', line: 'how to read the files, licence, caution' },
  ];
}

export function Downloads({ detail, simulation }: { detail: PhantomDetail; simulation: Simulation | undefined }) {
  return (
    <>
      <div className="sh gap-top" id="download"><h2>Download</h2><p>version {detail.version.n}</p></div>
      <div className="sheet">
        {versionFiles(detail, simulation).map(({ file, name, line }) => (
          <div className="dlrow" key={file}><span>{name}<em>{line}</em></span><span className="mono mu">{file}</span><a href={apiUrl(`${versionPath(detail.slug, detail.version.n)}/files/${file}`)} download={`${detail.slug}-v${detail.version.n}-${file}`} aria-label={`Download ${name}`}>Download</a></div>
        ))}
      </div>
      <p className="sm" style={{ marginTop: 8 }}>Results are about methods, not about patients or plant: not for diagnosis, not a safety case.</p>
    </>
  );
}
