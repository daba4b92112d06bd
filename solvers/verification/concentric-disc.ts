import { concentricEigenvalue, neumannToDirichlet } from '../problems/electrical-impedance/continuum';
import { electrodeFrame } from '../problems/electrical-impedance/electrodes';
import { sampleConductivity } from '../problems/electrical-impedance/simulation';
import { simulationDetail, simulationMesh } from '../problems/electrical-impedance/simulation-mesh';
import { digestOf, relativeGap, type VerificationCheck } from './check';
import { discTruth, unitDisc } from './disc';

const inside = 2;
const rho = 0.5;

/** Eigenvalue of the Neumann-to-Dirichlet map with the elements that simulate. */
function eigenvalue(n: number): number {
  const frame = electrodeFrame(unitDisc({ electrodes: 8 }));
  const truth = discTruth(0, 0, rho, inside);
  const { quadratic } = simulationMesh(truth, frame, simulationDetail(0.01));
  return neumannToDirichlet(quadratic, sampleConductivity(truth, quadratic, frame), [{ n, kind: 'cos' }])[0];
}

function mode(n: number, published: string): VerificationCheck {
  return {
    key: `concentric-disc-mode-${n}`,
    group: 'Forward models',
    name: `Concentric disc, mode ${n}`,
    line: 'Neumann-to-Dirichlet eigenvalue, s\u00a0=\u00a02, ρ\u00a0=\u00a00.5',
    published,
    unit: '',
    bound: 3e-5,
    reason: 'Relative discretisation error of the quadratic elements on the simulation mesh: a third of the 1e-4 that a simulation may have.',
    source: {
      short: 'Isaacson 1986',
      full: 'D. Isaacson, Distinguishability of conductivities by electric current computed tomography, IEEE Trans. Med. Imaging MI-5 (1986) 91-95: (1/n)(1 - μρ²ⁿ)/(1 + μρ²ⁿ), μ = (s - 1)/(s + 1).',
    },
    cost: 'heavy',
    run() {
      const measured = eigenvalue(n);
      return { measured, gap: relativeGap(measured, concentricEigenvalue(rho, inside, 1, n)), digest: digestOf(measured) };
    },
  };
}

/** 11/13 and 767/3076. */
export const concentricDiscChecks: readonly VerificationCheck[] = [mode(1, '0.846154'), mode(4, '0.249350')];
