import type { Citation } from '../../../../shared/contracts/benches';
import { Button, ButtonAnchor, ButtonLink } from '../../../components/ui/button';
import { useAxis } from '../../../components/noise-rule/axis-context';
import { useToast } from '../../../components/ui/toast';
import { apiUrl } from '../../../lib/api-client';

/** How to cite the reading, and the ways to take it along. */
export function CiteBench({ slug, noise, metric, citation, comparePath, compareLabel }: { slug: string; noise: number; metric: string; citation: Citation | undefined; comparePath: string | null; compareLabel: string }) {
  const axis = useAxis();
  const toast = useToast();
  const copy = (text: string, what: string) => {
    navigator.clipboard.writeText(text).then(
      () => toast(`${what} copied.`),
      () => toast('The browser did not allow copying. Select the text instead.'),
    );
  };
  const words = citation ? `${citation.plain}, read at ${axis.isNoise ? axis.format(noise) : axis.at(noise)}.` : '';
  return (
    <div>
      <h3>Cite this bench</h3>
      {citation ? <p className="mono" style={{ fontSize: 12, overflowWrap: 'anywhere' }}>{words}</p> : null}
      <div className="flex gap-x2 flex-wrap" style={{ marginTop: 8 }}>
        {comparePath ? <ButtonLink to={comparePath}>{compareLabel}</ButtonLink> : null}
        {citation ? <Button onClick={() => copy(words, 'Citation')}>Copy citation</Button> : null}
        {citation ? <Button onClick={() => copy(citation.bibtex, 'BibTeX')}>BibTeX</Button> : null}
        <ButtonAnchor href={apiUrl(`/benches/${encodeURIComponent(slug)}/ranking.csv`, { noise, metric })} download>Ranking as CSV</ButtonAnchor>
        <ButtonAnchor href={apiUrl(`/benches/${encodeURIComponent(slug)}/table.csv`)} download>Full table as CSV</ButtonAnchor>
        <Button onClick={() => window.print()}>Print sheet</Button>
      </div>
    </div>
  );
}
