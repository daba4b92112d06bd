import { useQueries, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import { BodyImage } from '../../../components/images/body-image';
import { toPicture } from '../../../components/images/pixels';
import { Section } from '../../../components/ui/layout';
import { Empty, SealedDisc } from '../../../components/ui/notices';
import { StateMark } from '../../../components/ui/state-mark';
import { formatCount, numberWord } from '../../../lib/format';
import { paths } from '../../../lib/paths';
import type { Configuration } from '../../../../shared/contracts/solvers';
import { usePreviewPhantom } from '../api/bench-data';
import { runPictureQueryOptions, runTrialsQueryOptions } from '../api/run-data';
import { findFailures, type Failure, type RunTrials } from '../model/failures';
import { previewPhantom } from '../model/preview-data';
import type { StabilityItem } from './stability-section';

/** Worst cases over all trials of the version: what happened, where, and the picture of it. */
export function FailedSection({ items, configuration }: { items: readonly StabilityItem[]; configuration: Configuration }) {
  const trials = useQueries({ queries: items.map((item) => runTrialsQueryOptions(item.run)) });
  const smallest = configuration.parameters.smallestAlpha;
  const runs = items.flatMap((item, i): RunTrials[] => {
    const data = trials[i]?.data;
    return data ? [{ run: item.run, phantom: item.phantom, axis: item.axis, ladder: item.levels.map((l) => l.level), trials: data, trivial: item.trivial, smallestParameter: typeof smallest === 'number' ? smallest : null }] : [];
  });
  const pending = trials.some((t) => t.isPending);
  const { failures, trials: count } = findFailures(runs);
  const shown = failures.slice(0, 3);
  return (
    <Section title="Where it failed" note={pending ? 'reading the trials' : `${numberWord(failures.length)} ${failures.length === 1 ? 'kind' : 'kinds'} of failure over ${formatCount(count)} trials, worst first`}>
      {!pending && shown.length === 0 ? <Empty title="No failure on these phantoms">Over the whole ladder it stays better than the background alone, loses no target and has no draw that stands out.</Empty> : (
        <div className="sheet failg">{shown.map((failure) => <FailureCard key={failure.kind} failure={failure} />)}{pending && shown.length === 0 ? <div className="pad grow"><div className="sk" /></div> : null}</div>
      )}
    </Section>
  );
}

function FailureCard({ failure }: { failure: Failure }) {
  return (
    <div className="fc">
      {failure.phantom.sealed ? <SealedDisc size={104} /> : <FailurePicture failure={failure} />}
      <div>
        <StateMark state={failure.state} word={failure.title} />
        <p>{failure.text}{failure.phantom.sealed ? ' Image withheld while sealed.' : ''}</p>
        <p style={{ marginTop: 4 }}><Link to={paths.run(failure.run)}>Open run</Link></p>
      </div>
    </div>
  );
}

function FailurePicture({ failure }: { failure: Failure }) {
  const { slug, version } = failure.phantom;
  const image = useQuery(runPictureQueryOptions(failure.run, failure.level, failure.draw));
  const { detail, simulation } = usePreviewPhantom(slug, version);
  const phantom = useMemo(() => (detail.data && simulation.data ? previewPhantom(detail.data, simulation.data) : null), [detail.data, simulation.data]);
  const picture = useMemo(() => (image.data && phantom ? toPicture(image.data.image, phantom.grid) : null), [image.data, phantom]);
  return <span style={{ display: 'block', width: 104 }}><BodyImage label={`Reconstruction of draw ${failure.draw + 1}`} picture={picture} body={phantom?.grid.body} under={phantom?.truth} low={phantom?.range[0] ?? 0} high={phantom?.range[1] ?? 1} /></span>;
}
