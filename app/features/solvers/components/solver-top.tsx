import { Link } from 'react-router-dom';
import { Formula } from '../../../components/ui/formula';
import { FactList } from '../../../components/ui/layout';
import { Markdown } from '../../../components/ui/markdown';
import { formatNumber, formatSeconds } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { SolverDetail, SolverStability } from '../../../../shared/contracts/solvers';
import { capabilityWords } from '../model/method-classes';
import { allowedWords, noiseWords, ruleWords, valueWords } from '../model/parameter-facts';
import { findMethod } from '../model/solver-form';

type Version = SolverDetail['versions'][number];

/** What it is, its parameters, its rule and source. */
export function SolverTop({ solver, version, stability }: { solver: SolverDetail; version: Version; stability: SolverStability | undefined }) {
  const method = findMethod(version.configuration.method);
  const times = (stability?.items ?? []).flatMap((i) => (i.secondsPerReconstruction === null ? [] : [i.secondsPerReconstruction])).sort((a, b) => a - b);
  const ratios = (stability?.items ?? []).flatMap((i) => (i.timeRatio === null ? [] : [i.timeRatio])).sort((a, b) => a - b);
  const time = times[times.length >> 1];
  const ratio = ratios[ratios.length >> 1];
  const { declaration } = version;
  return (
    <section className="sheet sv-top">
      <div>
        <h2>What it is</h2>
        {method ? (
          <>
            <p className="lead">{method.summary}</p>
            <div className="fline" tabIndex={0} role="region" aria-label="Formula of the method"><Formula tex={method.formula} label={`Formula of ${method.name}`} /></div>
            <p className="sm"><i>J</i> sensitivity at the background <i>x</i><sub>b</sub>, <i>y</i> data, <i>F</i> the inversion model. <Link to={paths.referenceEntry('methods', method.key)}>{method.name} on the reference</Link></p>
          </>
        ) : <p className="lead">{solver.methodName}. This page&apos;s code does not know the method; a newer page may.</p>}
        {solver.description.trim() ? <div style={{ marginTop: 12 }}><Markdown source={solver.description} /></div> : null}
      </div>
      <div>
        <h2>Parameters</h2>
        {method?.fields.length ? (
          <table className="pt">
            <caption className="vh">Parameters of version {version.n}</caption>
            <thead><tr><th scope="col">Name</th><th scope="col" className="num">Value</th><th scope="col">Unit</th><th scope="col" className="num">Allowed</th></tr></thead>
            <tbody>
              {method.fields.map((field) => (
                <tr key={field.name}><td title={field.help}>{field.label}</td><td className="num">{valueWords(field, version.configuration.parameters[field.name] ?? field.default)}</td><td>{field.kind === 'choice' ? '' : field.unit}</td><td className="num mu">{allowedWords(field)}</td></tr>
              ))}
            </tbody>
          </table>
        ) : <p className="sm">It has no parameters.</p>}
      </div>
      <div>
        <h2>Rule and source</h2>
        <FactList
          facts={[
            ['Rule', ruleWords(version.configuration.rule)],
            ['Noise level', noiseWords(version.configuration.rule)],
            ['Source', method?.sources.map((s) => s.short).join('; ') ?? '–'],
            ['Capabilities', method ? capabilityWords(method) : '–'],
            ['Time each', time === undefined ? 'not measured yet' : `${formatSeconds(time)}${ratio === undefined ? '' : `, ${formatNumber(ratio, 2)} × truncated SVD`}`],
            ['Declared', [declaration.notTuned ? 'not tuned on the phantoms' : 'tuning not excluded', declaration.ownMesh ? 'own discretisation' : 'discretisation not declared'].join(', ')],
          ]}
        />
      </div>
    </section>
  );
}
