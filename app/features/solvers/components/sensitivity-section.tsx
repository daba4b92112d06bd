import { useQuery } from '@tanstack/react-query';
import { ParameterChart } from '../../../components/charts/parameter-chart';
import { PicardChart } from '../../../components/charts/picard-chart';
import { ErrorPanel, Loading } from '../../../components/ui/notices';
import { axisView } from '../../../lib/axis-words';
import { formatNumber } from '../../../lib/format';
import type { Sensitivity } from '../../../../shared/contracts/runs';
import { sensitivityQueryOptions } from '../api/run-data';
import type { StabilityItem } from './stability-section';

/** Where the rule lands, and where the noise takes over, at the ladder level nearest to the rule's noise. */
export function SensitivitySection({ item, level, levelNoise }: { item: StabilityItem; level: number; levelNoise: number }) {
  const axis = axisView(item.axis);
  const at = axis.isNoise ? axis.format(levelNoise) : axis.at(levelNoise);
  const sensitivity = useQuery(sensitivityQueryOptions(item.run, level));
  if (sensitivity.isPending) return <section className="sec"><Loading label="Fetching the error against the parameter" /></section>;
  if (sensitivity.isError) return <section className="sec"><ErrorPanel error={sensitivity.error} what="Error against the parameter" onRetry={() => void sensitivity.refetch()} /></section>;
  const data = sensitivity.data;
  if (!data || data.parameters.length === 0) return null;
  return (
    <section className="sec sv-two">
      <div className="sheet">
        <div className="sh cap"><h2>Error against the parameter</h2><p>on {item.phantom.name} at {at}</p></div>
        <div style={{ padding: '6px 14px 4px 6px' }}>
          <ParameterChart label={`Relative L2 error against the parameter, with the ${data.choices.length} choices of the rule`} parameterName={plainName(data.parameterName)} curve={data.parameters.map((parameter, i) => ({ parameter, error: data.errors[i] ?? null }))} choices={data.choices} oracle={data.oracle} trivial={item.trivial} />
        </div>
        <p className="sm foot-note">{ruleSentence(data)} The oracle uses the truth and is never ranked.</p>
      </div>
      {data.picard ? (
        <div className="sheet">
          <div className="sh cap"><h2>Discrete Picard view</h2><p>{data.picard.singularValues.length} independent data at {at}</p></div>
          <div style={{ padding: '6px 14px 4px 6px' }}><PicardChart {...data.picard} /></div>
          <p className="sm foot-note">{data.picard.crossing === null ? 'The data stay above the noise throughout.' : <>Up to number <b>{data.picard.crossing}</b> the data stand above the noise, so the solution is determined. Beyond it the ratio grows with the noise, and only the penalty holds it.</>}</p>
        </div>
      ) : null}
    </section>
  );
}

/** A LaTeX name as plain text for an axis. */
export function plainName(tex: string): string {
  const signs: Record<string, string> = { alpha: 'α', sigma: 'σ', lambda: 'λ', tau: 'τ', mu: 'μ' };
  return tex.replace(/\\([a-z]+)/gi, (_, name: string) => signs[name] ?? name).replace(/_\{?(\w+)\}?/g, (_, s: string) => (s === '1' ? '₁' : `_${s}`));
}

/** How far the rule lands from the best parameter, in words. */
export function ruleSentence(data: Pick<Sensitivity, 'choices' | 'oracle'>): string {
  const ratios = data.choices.flatMap((c) => (c.error === null ? [] : [c.error / data.oracle.error])).sort((a, b) => a - b);
  if (ratios.length === 0) return 'The rule chose nothing here.';
  const at = (q: number): string => formatNumber(ratios[Math.round(q * (ratios.length - 1))], 3);
  const above = data.choices.filter((c) => c.parameter > data.oracle.parameter).length;
  const side = above > 0.8 * data.choices.length ? ' It lands above the best value at nearly every draw.' : above < 0.2 * data.choices.length ? ' It lands below the best value at nearly every draw.' : '';
  return `The rule lands at ${at(0.5)} times the best error (5 to 95 %: ${at(0.05)} to ${at(0.95)}).${side}`;
}
