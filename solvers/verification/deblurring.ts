import type { PointSpreadKey } from '../../shared/domain/geometry/deblurring';
import { blurredEdge } from '../checks/blurred-edge';
import type { Source } from '../core/types';
import { digestOf, largestGap, type VerificationCheck } from './check';

const cells = 32;

function edge(pointSpread: PointSpreadKey, shape: { readonly spread: number; readonly motionDeg?: number }, words: { readonly name: string; readonly line: string; readonly published: string; readonly source: Source }): VerificationCheck {
  return {
    key: `blurred-edge-${pointSpread}`,
    group: 'Forward models',
    name: words.name,
    line: `${words.line}: the pixel that holds the edge, edge of height 1; the gap is over a row of ${cells}`,
    published: words.published,
    unit: '',
    bound: 3e-4,
    reason: 'A sharp edge is known to the simulation by averages over samples, of which there are some twelve a pixel; the edge stands between two of them.',
    source: words.source,
    cost: 'heavy',
    run() {
      const { simulated, exact } = blurredEdge({ body: { kind: 'rectangle', width: 1, height: 1 }, pointSpread, ...shape, cells, edge: 'zero' });
      return { measured: simulated[cells / 2], gap: largestGap(simulated, exact), digest: digestOf(simulated) };
    },
  };
}

const closedForm = (full: string): Source => ({ short: 'closed form', full, fromMemory: true });

export const deblurringChecks: readonly VerificationCheck[] = [
  edge('gaussian', { spread: 0.0625 }, {
    name: 'Edge blurred by a Gaussian', line: 'deviation 2 pixels', published: '0.463923',
    source: closedForm('(1 + erf(x / (sigma sqrt 2))) / 2, averaged over the pixel. Textbook result.'),
  }),
  edge('disc', { spread: 0.09375 }, {
    name: 'Edge blurred by a disc', line: 'radius 3 pixels', published: '0.461371',
    source: closedForm('Area of a segment of the disc over that of the disc, averaged over the pixel. Textbook result.'),
  }),
  edge('motion', { spread: 0.125, motionDeg: 30 }, {
    name: 'Edge blurred by a motion', line: '8 pixels at 30 degrees', published: '0.473586',
    source: closedForm('A ramp of the length of the motion across the edge, averaged over the pixel. Textbook result.'),
  }),
];
