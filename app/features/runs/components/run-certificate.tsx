import type { CheckResultWire } from '../../../../shared/contracts/common';
import type { RunDetail } from '../../../../shared/contracts/runs';
import { CertificateStrip, CheckRow } from '../../../components/ui/checks';
import { Seal } from '../../../components/ui/seal';
import type { MarkState } from '../../../components/ui/state-mark';
import { formatHash, formatNumber } from '../../../lib/format';

export const checkReading = (check: CheckResultWire): string =>
  check.figure === null ? '–' : `${formatNumber(check.figure, 3)}${check.unit ? ` ${check.unit}` : ''}`;

export function checkBound(check: CheckResultWire): string {
  if (check.bound === null || check.comparison === null) return '';
  const words = { 'at-most': 'at most', 'at-least': 'at least', equal: 'equal to' } as const;
  return `bound: ${words[check.comparison]} ${formatNumber(check.bound, 2)}`;
}

const stateOf = (check: CheckResultWire): MarkState => check.state;

/** The checks of a run, each with figure, bound and source; the seal of the result last. */
export function RunCertificate({ run }: { run: RunDetail }) {
  if (!run.checks.length) return null;
  const meaning = (check: CheckResultWire) => [check.meaning.replace(/\.$/, ''), checkBound(check), check.source].filter(Boolean).join('; ');
  return (
    <section aria-label="Validation checks" id="checks">
      <div className="only-d" style={{ marginTop: 20 }}>
        <CertificateStrip
          cells={run.checks.map((check) => ({ name: check.name, state: stateOf(check), reading: checkReading(check), meaning: meaning(check) }))}
          hash={run.resultHash}
          sealNote="over all trial images in order"
        />
      </div>
      <div className="sheet only-m" style={{ marginTop: 14 }}>
        {run.checks.map((check) => <CheckRow key={check.key} name={check.name} how={meaning(check)} reading={checkReading(check)} state={stateOf(check)} />)}
        {run.resultHash ? (
          <div className="mseal">
            <Seal hash={run.resultHash} size={54} />
            <div><span className="sm">Result hash</span><br /><span className="mono">{formatHash(run.resultHash, 4)}</span></div>
          </div>
        ) : null}
      </div>
    </section>
  );
}
