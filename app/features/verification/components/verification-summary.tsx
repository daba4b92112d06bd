import type { Verification } from '../../../../shared/contracts/verification';
import { Seal } from '../../../components/ui/seal';
import { StateMark } from '../../../components/ui/state-mark';
import { formatDateTime, formatHash, formatSeconds, thinSpace } from '../../../lib/format';
import { slowest, tallyBrowser, tightest, type BrowserResult } from '../model/verdicts';

const marginText = (margin: number): string => `×${thinSpace}${margin < 100 ? margin.toPrecision(2) : Math.round(margin)}`;

/** The strip: what passed, by how much, how long it took, what this browser says, and the hash of the results. */
export function VerificationSummary({ data, results }: { data: Verification; results: ReadonlyMap<string, BrowserResult> }) {
  const { items, running, at, resultHash, codeVersion } = data;
  const count = (state: string): number => items.filter((item) => item.state === state).length;
  const failed = count('fail');
  const missing = count('not-run');
  const margin = tightest(items);
  const slow = slowest(items);
  const browser = tallyBrowser(items, results);
  const faults = [failed ? `${failed} failed` : '', missing ? `${missing} not run` : ''].filter(Boolean).join(', ');
  return (
    <div className="cert vf-strip" role="group" aria-label="Summary">
      <div>
        <h2>On the server{running && missing ? <StateMark state="running" word={`${missing} to go`} size={12} /> : faults ? <StateMark state={failed ? 'fail' : 'caution'} word={faults} size={12} /> : null}</h2>
        <div className="v">{count('pass')} of {items.length} pass</div>
        <p>{at ? `${formatDateTime(at)}, ` : ''}code <span className="mono">{codeVersion}</span></p>
      </div>
      <div>
        <h2>Tightest margin</h2>
        <div className="v">{margin ? marginText(margin.margin) : '–'}</div>
        <p>{margin ? margin.item.name : 'nothing measured yet'}</p>
      </div>
      <div>
        <h2>Slowest</h2>
        <div className="v">{formatSeconds(slow?.seconds)}</div>
        <p>{slow ? slow.name : 'nothing measured yet'}</p>
      </div>
      <div>
        <h2>In this browser</h2>
        <div className="v">{browser.done} of {items.length}</div>
        <p role="status">{browser.words}</p>
      </div>
      <div className="vf-seal">
        {resultHash ? <Seal hash={resultHash} size={60} /> : null}
        <div>
          <h2>Result hash</h2>
          {resultHash ? <p className="mono">{formatHash(resultHash, 2)}<br />{formatHash(resultHash.slice(8), 2)}</p> : <p>once every check has a result</p>}
        </div>
      </div>
    </div>
  );
}
