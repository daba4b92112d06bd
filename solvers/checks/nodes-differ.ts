import type { DefinitionOf } from '../../shared/domain/phantom-definition';
import { blurField } from '../problems/deblurring/simulation';
import { pictureOf } from '../problems/deblurring/picture';
import { equationOf } from '../problems/integral-equation/equations';
import { equationPanels } from '../problems/integral-equation/simulated-phantom';
import { discretisationsDifferCheck } from './discretisations-differ';
import { judge, type Check } from './check';
import type { PhantomCheckContext } from './phantom-check';

const { key, name, source, comparison, bound } = discretisationsDifferCheck;
const common = { key, name, source, comparison, bound, unit: 'nodes', formula: '\\#(N_{\\mathrm{simulation}} \\cap N_{\\mathrm{inversion}})' } as const;

/** Two places are one when they lie this close, in cells. */
const coincidence = 1e-9;

/** The same question for a line: nodes of the quadrature that are midpoints of the inversion's cells. */
export const equationNodesDifferCheck: Check<PhantomCheckContext<DefinitionOf<'integral-equation'>>> = {
  ...common,
  summary: 'Data must not be inverted by the rule that made them (an inverse crime): no node of the quadrature is the middle of a cell.',
  evaluate({ definition: { geometry }, truth }) {
    const { from, to } = equationOf(geometry);
    const { nodes, edges } = equationPanels(geometry, (t) => truth.valueAt(t, 0));
    let shared = 0;
    for (const t of nodes) {
      const place = ((t - from) / (to - from)) * geometry.cells - 0.5;
      if (Math.abs(place - Math.round(place)) < coincidence) shared++;
    }
    return judge(this, shared, `Nodes that the simulation (Gauss-Legendre, ${edges.length - 1} panels) and the inversion (${geometry.cells} cells) have in common.`);
  },
};

/** The same for pictures: samples of the simulated field at the centres of pixels. */
export const pictureNodesDifferCheck: Check<PhantomCheckContext<DefinitionOf<'deblurring'>>> = {
  ...common,
  summary: 'Data must not be inverted by the rule that made them (an inverse crime): no sample of the simulated field is the centre of a pixel.',
  evaluate({ definition: { geometry } }) {
    const { nx, ny } = pictureOf(geometry);
    const { samples, marginX, marginY } = blurField(geometry);
    const centred = (count: number, margin: number): number => {
      let found = 0;
      for (let k = 0; k < (count + 2 * margin) * samples; k++) {
        const place = (k + 0.5) / samples - margin - 0.5;
        if (place > -0.5 && place < count - 0.5 && Math.abs(place - Math.round(place)) < coincidence) found++;
      }
      return found;
    };
    return judge(this, centred(nx, marginX) * centred(ny, marginY), `Samples (${samples} x ${samples} a pixel, with ${marginX} and ${marginY} pixels around the picture) at the centre of one of the ${nx} x ${ny} pixels.`);
  },
};
