import type { VerificationItem } from '../../../../shared/contracts/verification';
import { MarginBar } from '../../../components/charts/margin-bar';
import { StateMark } from '../../../components/ui/state-mark';
import { formatNumber, formatSeconds, thinSpace } from '../../../lib/format';
import { measuredValue, printedValue } from '../model/printed';
import { browserVerdict, byGroup, verdictMarks, type BrowserResult } from '../model/verdicts';

interface Props {
  items: readonly VerificationItem[];
  /** The server still works on what has not run. */
  running: boolean;
  results: ReadonlyMap<string, BrowserResult>;
  onRun: (key: string) => void;
}

/** Every check in its group: published and measured value, gap against bound, source, both machines. */
export function VerificationTable({ items, running, results, onRun }: Props) {
  return (
    <div className="sheet">
      <table className="vf">
        <thead>
          <tr>
            <th>Check</th><th className="num">Published</th><th className="num">Measured here</th><th className="num">Bound<span>on the gap</span></th>
            <th className="mg">Gap against bound<span className="vf-axis"><i>10⁻¹⁶</i><i>10⁻⁸</i><i>1</i></span></th>
            <th className="src">Source</th><th>On the server</th><th>In this browser</th>
          </tr>
        </thead>
        {byGroup(items).map(([group, list]) => (
          <tbody key={group}>
            <tr className="gp"><th scope="rowgroup" colSpan={8}>{group}</th></tr>
            {list.map((item) => <Row key={item.key} item={item} running={running} result={results.get(item.key)} onRun={onRun} />)}
          </tbody>
        ))}
      </table>
    </div>
  );
}

/** Browsers keep their clock coarse: below its step nothing is known. */
const timeOf = (seconds: number): string => (seconds < 1e-4 ? `under 0.1${thinSpace}ms` : formatSeconds(seconds));

function Row({ item, running, result, onRun }: { item: VerificationItem; running: boolean; result: BrowserResult | undefined; onRun: Props['onRun'] }) {
  const { name, line, published, measured, unit, bound, gap, source, state } = item;
  const withUnit = (text: string): string => (unit === '' || text === '–' ? text : `${text}${thinSpace}${unit}`);
  return (
    <tr>
      <td className="vf-name">
        <details>
          <summary><b>{name}</b><em>{line}</em></summary>
          <p>{item.reason}</p>
          <p>{source.full}{source.fromMemory ? ' Reference from memory.' : ''}</p>
          {printedValue(published) === published || published.startsWith('-') ? null : <p className="mono">{published}</p>}
          {item.words ? <p>{item.words}</p> : null}
          {item.digest ? <p className="mono">SHA-256 of the result {item.digest}</p> : null}
        </details>
      </td>
      <td className="num" data-h="Published">{withUnit(printedValue(published))}</td>
      <td className={state === 'fail' ? 'num vf-measured vf-off' : 'num vf-measured'} data-h="Measured here">{withUnit(measuredValue(measured, published))}</td>
      <td className="num" data-h="Bound">{bound === 0 ? 'exact' : formatNumber(bound, 1)}</td>
      <td className="mg"><MarginBar gap={gap} bound={bound} failed={state === 'fail'} /></td>
      <td className="src">{source.short}{source.fromMemory ? ', from memory' : ''}</td>
      <td data-h="On the server">
        {state === 'not-run' ? <StateMark state={running ? 'queued' : 'pending'} word="Not run" /> : <StateMark state={state} />}
        {item.seconds === null ? null : <span className="vf-time">{timeOf(item.seconds)}</span>}
      </td>
      <td className="br" data-h="In this browser"><InBrowser item={item} result={result} onRun={onRun} /></td>
    </tr>
  );
}

function InBrowser({ item, result, onRun }: { item: VerificationItem; result: BrowserResult | undefined; onRun: Props['onRun'] }) {
  const button = <button type="button" className="lk" aria-label={`Run here: ${item.name}, ${item.line}`} onClick={() => onRun(item.key)}>Run here</button>;
  if (!result) return button;
  if (result.state === 'waiting') return <StateMark state="queued" word="Waits" />;
  if (result.state === 'running') return <StateMark state="running" />;
  if (result.state === 'failed') return <><StateMark state="fail" word={result.message} />{button}</>;
  const [mark, word] = verdictMarks[browserVerdict(item, result.outcome)];
  return <><StateMark state={mark} word={word} /><span className="vf-time">{timeOf(result.outcome.seconds)}</span></>;
}
