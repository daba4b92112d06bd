import type { EitGeometry } from '../../shared/domain/geometry/electrical-impedance';
import { isDisc } from '../problems/electrical-impedance/body-curve';
import { neumannToDirichletByBoundaryIntegrals } from '../problems/electrical-impedance/boundary-integrals/neumann-to-dirichlet';
import { concentricEigenvalue, neumannToDirichlet, type Harmonic } from '../problems/electrical-impedance/continuum';
import { simulatorFor } from '../problems/electrical-impedance/data-simulation';
import { electrodeFrame } from '../problems/electrical-impedance/electrodes';
import { contactNumber, sampleConductivity } from '../problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../problems/electrical-impedance/simulation-mesh';
import { createTruthField, type TruthField } from '../truth/truth-field';
import { judge, notApplicable, type Check } from './check';
import type { ImpedanceCheckContext } from './phantom-check';

const orders = [1, 2, 3, 5, 8];

/**
 * The simulator of the phantom (its elements on a mesh with this geometry's electrode ends, or its panels) against the disc with a
 * concentric inclusion.
 * A phantom that is itself one concentric disc is checked as it is; every other one through a disc of half the radius and
 * five times the background.
 */
export const closedFormCheck: Check<ImpedanceCheckContext> = {
  key: 'closed-form',
  name: 'Closed form of the concentric disc',
  unit: '',
  // What a simulation may be off by; the figures are about 1e-5 with elements, 1e-9 with boundary integrals.
  bound: 1e-4,
  comparison: 'at-most',
  formula: '\\max_n |\\lambda_n^h - \\lambda_n| / \\lambda_n, \\quad \\lambda_n = \\frac{1}{n} \\frac{1 - \\mu \\rho^{2n}}{1 + \\mu \\rho^{2n}}, \\quad \\mu = \\frac{s - 1}{s + 1}',
  summary: 'Eigenvalues n = 1, 2, 3, 5, 8 of the Neumann-to-Dirichlet map by the simulator of the phantom: its elements and electrode ends, or its panels.',
  source: { short: 'Isaacson 1986', full: 'D. Isaacson, Distinguishability of conductivities by electric current computed tomography, IEEE Trans. Med. Imaging MI-5 (1986) 91-95.' },
  evaluate({ definition, truth: field }) {
    const { geometry, truth } = definition;
    if (!isDisc(geometry.body)) return notApplicable(this, 'The closed form holds for a disc only.');
    const radius = geometry.body.radius;
    const own = truth.kind === 'shapes' && truth.shapes.length === 1 ? truth.shapes[0] : null;
    const concentric = own?.kind === 'ellipse' && own.x === 0 && own.y === 0 && own.semiAxisA === own.semiAxisB && own.semiAxisA < 0.95 * radius ? own : null;
    const rho = concentric ? concentric.semiAxisA / radius : 0.5;
    const ratio = concentric ? concentric.value / truth.background : 5;
    const disc = createTruthField({
      kind: 'shapes',
      background: 1,
      shapes: [{ kind: 'ellipse', label: 'disc', target: true, value: ratio, x: 0, y: 0, semiAxisA: rho * radius, semiAxisB: rho * radius, angleDeg: 0 }],
    });
    const harmonics: Harmonic[] = orders.map((n) => ({ n, kind: 'cos' }));
    const byPanels = simulatorFor(field, geometry) === 'boundary-integrals';
    const map = byPanels ? neumannToDirichletByBoundaryIntegrals(disc, radius, harmonics) : byElements(disc, geometry, contactNumber(geometry, truth.background), harmonics);
    let figure = 0;
    orders.forEach((n, i) => {
      const exact = concentricEigenvalue(rho, ratio, 1, n);
      figure = Math.max(figure, Math.abs(map[i * orders.length + i] - exact) / exact);
    });
    return judge(this, figure, `Largest relative error of the eigenvalues for a disc of ${Number(rho.toPrecision(3))} of the radius and ${Number(ratio.toPrecision(3))} times the background, by ${byPanels ? 'boundary integrals' : 'finite elements'}.`);
  },
};

function byElements(disc: TruthField, geometry: EitGeometry, contact: number, harmonics: readonly Harmonic[]): Float64Array {
  const frame = electrodeFrame(geometry);
  const { quadratic } = simulationMesh(disc, frame, simulationDetail(contact));
  return neumannToDirichlet(quadratic, sampleConductivity(disc, quadratic, frame), harmonics);
}
