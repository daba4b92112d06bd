import { servedByBoundaryIntegrals } from '../problems/electrical-impedance/boundary-integrals/simulate';
import { simulateElectricalImpedance } from '../problems/electrical-impedance/simulation';
import { judge, notApplicable, type Check } from './check';
import type { ImpedanceCheckContext } from './phantom-check';

/** Up to this the result is a warning: near touching outlines finite elements are off by more than the bound. */
const limit = 1e-3;

/** Two simulators that share no discretisation: panels on curves, and elements in the body. */
export const simulatorsAgreeCheck: Check<ImpedanceCheckContext> = {
  key: 'simulators-agree',
  name: 'Two simulators agree',
  unit: '',
  // What finite elements may be off by; boundary integrals are off by about 1e-9.
  bound: 1e-4,
  comparison: 'at-most',
  formula: '\\|y - y_{\\mathrm{FE}}\\|_\\infty \\,/\\, \\|y\\|_\\infty',
  summary: 'Voltages simulated by boundary integrals against the same by finite elements, over the largest. Phantoms with smooth outlines clear of each other and of the boundary are served by both. Above the bound and up to 0.001 it is a warning.',
  source: {
    short: 'Somersalo, Cheney, Isaacson 1992',
    full: 'E. Somersalo, M. Cheney, D. Isaacson, Existence and uniqueness for electrode models for electric current computed tomography, SIAM J. Appl. Math. 52 (1992) 1023-1040: one solution, whatever computes it.',
    fromMemory: true,
  },
  evaluate({ definition, truth, frame }) {
    const reason = servedByBoundaryIntegrals(truth, definition.geometry);
    if (reason !== null) return notApplicable(this, `Finite elements alone simulate this phantom. ${reason}`);
    const { data } = simulateElectricalImpedance(truth, definition.geometry);
    let difference = 0;
    let largest = 0;
    for (let i = 0; i < frame.length; i++) {
      difference = Math.max(difference, Math.abs(frame[i] - data[i]));
      largest = Math.max(largest, Math.abs(frame[i]));
    }
    const figure = difference / largest;
    const result = judge(this, figure, 'Largest difference of the voltages by boundary integrals and by finite elements, over the largest voltage.');
    return result.state === 'fail' && figure <= limit ? { ...result, state: 'warning' } : result;
  },
};
