import { adjointCheck } from '../checks/adjoint';
import { taylorCheck } from '../checks/taylor';
import { matmulTransposed, transpose } from '../linear-algebra/matrix-product';
import { electrodeIntegrals } from '../problems/electrical-impedance/electrode-integrals';
import { electrodeModel, solveElectrodes } from '../problems/electrical-impedance/electrode-model';
import { electrodeFrame } from '../problems/electrical-impedance/electrodes';
import { denseMatrix } from '../core/matrix-operator';
import { createEitInversion } from '../problems/electrical-impedance/inversion-problem';
import { frameJacobian } from '../problems/electrical-impedance/jacobian';
import { elementsByCell, pairSensitivities, unitStiffness } from '../problems/electrical-impedance/sensitivity';
import { contactNumber, contactNumbers, sampleConductivity } from '../problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../problems/electrical-impedance/simulation-mesh';
import { digestOf, largestGap, type VerificationCheck } from './check';
import { eccentricDisc, unitDisc } from './disc';

const problem = () => createEitInversion(unitDisc({ electrodes: 8 }), 1, 'difference');
const figureOf = (figure: number | null): number => figure ?? NaN;

const adjoint: VerificationCheck = {
  key: 'adjoint',
  group: 'Derivatives',
  name: 'Adjoint',
  line: 'two inner products, five pairs of random vectors, inversion model of 8 electrodes',
  published: 'equal',
  unit: '',
  bound: 1e-10,
  reason: 'The identity is exact; sums over 1,600 cells leave rounding of about 1e-13, with room for pairs whose products nearly cancel.',
  source: adjointCheck.source,
  cost: 'heavy',
  run() {
    const model = problem();
    const gap = figureOf(adjointCheck.evaluate(model).figure);
    return { measured: gap === 0 ? 'equal' : 'equal to rounding', gap, digest: digestOf(denseMatrix(model.linearise(model.background())), gap) };
  },
};

const taylor: VerificationCheck = {
  key: 'taylor',
  group: 'Derivatives',
  name: 'Taylor remainder',
  line: 'smallest slope over five step sizes, inversion model of 8 electrodes',
  published: '2',
  unit: '',
  bound: 0.1,
  reason: 'At finite steps the third-order term still bends the line; a wrong derivative gives slope 1.',
  source: { short: 'theorem', full: 'The remainder of a first-order Taylor expansion is of second order. Common practice, no source.' },
  cost: 'heavy',
  run() {
    const measured = figureOf(taylorCheck.evaluate(problem()).figure);
    return { measured, gap: Math.abs(measured - 2), digest: digestOf(measured) };
  },
};

/** d(U_m - U_(m+1)) / ds, m = 0 .. 15, V per S/m, for +1 A/m into electrode 1, -1 into 2, at s = 5 S/m in the disc. */
const sensitivities: readonly number[] = [-0.0015816888716139548, -0.0010314868128839343, 0.00026074857463961876, 0.0006600893502296581, 0.0005905269573929645, 0.0004637374364291347, 0.000366088239076486, 0.00029972813066538506, 0.0002555124470504655, 0.0002253218672430372, 0.0002022128768074579, 0.00017767475936070198, 0.00013538618756255005, 3.5204810434549816e-05, -0.00022533271276612793, -0.0008337232396386323];

const sensitivity: VerificationCheck = {
  key: 'adjoint-sensitivity',
  group: 'Derivatives',
  name: 'Sensitivity to an inclusion',
  line: 'dU/dσ of the eccentric disc by the adjoint formula, first of 16 adjacent voltages; the gap is over all',
  published: '-0.001581689',
  unit: 'V m/S',
  bound: 1e-3,
  reason: 'The data of this mesh may be off by 1e-4; a derivative loses about one digit.',
  source: {
    short: 'converged, difference quotient',
    full: 'Fourth-order difference quotient of a semi-analytic solver of the complete electrode model (self-convergence 1e-9), confirmed by an independent adjoint code with 179,000 unknowns (to 5e-6).',
  },
  cost: 'heavy',
  run() {
    const geometry = unitDisc({ measurement: 'adjacent-all' });
    const L = geometry.electrodes;
    const frame = electrodeFrame(geometry);
    const truth = eccentricDisc();
    const mesh = simulationMesh(truth, frame, simulationDetail(contactNumber(geometry, 1))).quadratic;
    const model = electrodeModel(mesh, electrodeIntegrals(mesh, frame));
    const currents = new Float64Array(L * L);
    for (let j = 0; j < L; j++) {
      currents[j * L + j] = 1;
      currents[j * L + ((j + 1) % L)] = -1;
    }
    const sigma = sampleConductivity(truth, mesh, frame);
    const { voltages, unitPotentials } = solveElectrodes(model, sigma, contactNumbers(geometry, 1), currents);
    const fields = matmulTransposed(transpose(unitPotentials, L, model.pattern.n), voltages, model.pattern.n, L, L);
    // Two cells: outside and inside the disc.
    const cellOf = Int32Array.from({ length: mesh.elements.length / 6 }, (_, t) => (sigma[6 * t] > 3 ? 1 : 0));
    const jacobian = frameJacobian(geometry, pairSensitivities(mesh, unitStiffness(mesh), elementsByCell(cellOf, 2), fields, L), 2);
    const inside = Float64Array.from({ length: L }, (_, m) => jacobian[2 * m + 1]);
    return { measured: inside[0], gap: largestGap(inside, sensitivities), digest: digestOf(jacobian) };
  },
};

export const derivativeChecks: readonly VerificationCheck[] = [taylor, adjoint, sensitivity];
