import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import type { ProblemFacts } from '../../core/types';
import { symmetricEigen } from '../../linear-algebra/symmetric-eigen';
import { isDisc } from '../../problems/electrical-impedance/body-curve';
import { electrodeFrame } from '../../problems/electrical-impedance/electrodes';
import { mapUnfit, type ElectrodeData } from './electrode-data';

/** Why the harmonics of a disc cannot be had from a problem's frames; null where they can. */
export function harmonicsUnfit(facts: ProblemFacts): string | null {
  const reason = mapUnfit(facts);
  if (reason) return reason;
  const geometry = facts.geometry as EitGeometry;
  if (!isDisc(geometry.body)) return 'its formula is that of a disc, and the body has another shape.';
  if (geometry.electrodeAnglesDeg) return 'it reads harmonics from electrodes at equal spacing, and these are listed one by one.';
  const { contactImpedance: contact } = geometry;
  if (typeof contact !== 'number' && contact.some((value) => value !== contact[0])) return 'it reads harmonics from electrodes with one contact impedance, and these differ.';
  return null;
}

/** Number of harmonics with both a cosine and a sine that L electrodes can drive. */
export const harmonicCount = (L: number): number => Math.floor((L - 1) / 2);

/** Cells nearer to the rim than this share of the radius are left out where the gains are fitted: there the currents of single electrodes show. */
const fitRadius = 0.8;

/** Centres of the cells in the electrode frame, unit disc: x, y per cell. */
export function unitCentres(data: ElectrodeData): Float64Array {
  const { geometry, cellCentres } = data.problem;
  const frame = electrodeFrame(geometry);
  const centres = new Float64Array(cellCentres.length);
  for (let c = 0; c < centres.length; c += 2) centres.set(frame.toFrame(cellCentres[c], cellCentres[c + 1]), c);
  return centres;
}

/** A relative Neumann-to-Dirichlet map in harmonics of the unit disc and how it is had from electrodes. */
export interface HarmonicReader {
  /** N: harmonics cos(k theta), sin(k theta), k = 1 ... N. */
  readonly harmonics: number;
  /** Amplitude of the density cos(k theta) that the unit k-th pattern drives, 1/m per A/m on the unit disc. */
  readonly gains: Float64Array;
  /**
   * Relative Neumann-to-Dirichlet map on the unit disc over a background of 1, in the orthonormal harmonics cos(k theta) / sqrt(pi),
   * sin(k theta) / sqrt(pi), k = 1 ... N in turn: 2N x 2N, row-major.
   * @param relative of the electrodes, (L - 1) x (L - 1)
   */
  read(relative: Float64Array): Float64Array;
  /** Expected |T_mn|^2 of noise of norm 1 in the exponentials (`exponentialMatrix`), to first order; N x N. */
  readonly exponentialVariances: Float64Array;
}

/**
 * Harmonics from electrodes. A trigonometric pattern drives the harmonic of its own order and, under the electrodes, higher ones that
 * die out inwards. Its gain is fitted to the model itself: the power that the electrode model of the background dissipates in each cell
 * within 0.8 of the radius, for the k-th pattern, against gain^2 r^(2k-2), that of the harmonic r^k cos(k theta) / k; contact
 * impedance and the width of the electrodes are in it. The reading divides by the gains. (Isaacson 1986 for the patterns; the fit is
 * this library's own.)
 */
export function harmonicReader(data: ElectrodeData): HarmonicReader {
  const { problem, size } = data;
  const { geometry, unknownWeights, unknowns } = problem;
  const background = problem.background()[0];
  const radius = geometry.body.radius;
  const N = harmonicCount(geometry.electrodes);
  const centres = unitCentres(data);
  const sensitivities = data.sensitivities();
  const gains = new Float64Array(N);
  for (let k = 1; k <= N; k++) {
    let product = 0;
    let square = 0;
    for (let c = 0; c < unknowns; c++) {
      const r2 = centres[2 * c] * centres[2 * c] + centres[2 * c + 1] * centres[2 * c + 1];
      if (r2 > fitRadius * fitRadius) continue;
      let power = unknownWeights[c] / (radius * radius);
      for (let i = 1; i < k; i++) power *= r2;
      const cosine = (2 * k - 2) * size + 2 * k - 2;
      const sine = (2 * k - 1) * size + 2 * k - 1;
      // A cosine and a sine pattern together dissipate the same along a circle.
      product += 0.5 * (sensitivities[cosine * unknowns + c] + sensitivities[sine * unknowns + c]) * power;
      square += power * power;
    }
    gains[k - 1] = background * Math.sqrt(product / square);
  }
  const direction = geometry.numbering === 'clockwise' ? -1 : 1;
  const scale = Float64Array.from({ length: 2 * N }, (_, a) => (a % 2 === 0 ? 1 : direction) / gains[Math.floor(a / 2)]);
  const exponentialVariances = new Float64Array(N * N);
  for (let m = 0; m < N; m++) {
    for (let n = 0; n < N; n++) {
      const factor = ((m + 1) * (n + 1) * background) / (gains[m] * gains[n]);
      const straight = data.entryVariances[2 * m * size + 2 * n] + data.entryVariances[(2 * m + 1) * size + 2 * n + 1];
      const crossed = data.entryVariances[2 * m * size + 2 * n + 1] + data.entryVariances[(2 * m + 1) * size + 2 * n];
      // On the diagonal the crossed entries are one and the same, and drop out.
      exponentialVariances[m * N + n] = factor * factor * (m === n ? straight : straight + crossed);
    }
  }
  return {
    harmonics: N,
    gains,
    exponentialVariances,
    read(relative) {
      const out = new Float64Array(4 * N * N);
      for (let a = 0; a < 2 * N; a++)
        for (let b = 0; b < 2 * N; b++) out[a * 2 * N + b] = (background / Math.PI) * relative[a * size + b] * scale[a] * scale[b];
      return out;
    },
  };
}

/** Largest conductivity, in backgrounds, that one combination of harmonics may feel: noise can ask for more, or for less than nothing. */
const largestContrast = 20;

/**
 * Traces of the growing solutions that the scattering transform is made of: 'exponential' takes e^{ikz} itself (t-exp: Siltanen,
 * Mueller, Isaacson 2000); 'single-layer' corrects it by the single layer S of the Laplace equation, (1 + S (Lambda - Lambda_1))^{-1}
 * e^{ikz}, S = 1 / (2 n) on harmonic n (t-zero: Cornean, Knudsen, Siltanen 2006). Both from memory.
 */
export type Traces = 'exponential' | 'single-layer';

/**
 * Matrix of the relative Dirichlet-to-Neumann map between exponentials, T_mn = integral of e^{-i m theta} (Lambda - Lambda_1) psi_n,
 * m, n = 1 ... N, psi_n the trace that belongs to e^{i n theta}: Hermitian. With A = D^{1/2} dR D^{1/2}, D = diag(order), the map is
 * D^{1/2} ((1 + A)^{-1} - 1) D^{1/2} = -D^{1/2} A (1 + A)^{-1} D^{1/2}, and with the single layer -D^{1/2} A (1 + A / 2)^{-1} D^{1/2};
 * the eigenvalues of 1 + A, one over a mean conductivity, are kept above 1/20.
 * @param relative Neumann-to-Dirichlet map, 2N x 2N, as `HarmonicReader.read` gives it
 * @returns real parts, then imaginary parts: 2 x N x N, row-major
 */
export function exponentialMatrix(relative: Float64Array, N: number, traces: Traces = 'exponential'): Float64Array {
  const size = 2 * N;
  const root = Float64Array.from({ length: size }, (_, a) => Math.sqrt(Math.floor(a / 2) + 1));
  const scaled = new Float64Array(size * size);
  for (let a = 0; a < size; a++) for (let b = 0; b < size; b++) scaled[a * size + b] = root[a] * relative[a * size + b] * root[b];
  const { values, vectors } = symmetricEigen(scaled, size);
  const map = new Float64Array(size * size);
  for (let k = 0; k < size; k++) {
    const bounded = Math.max(values[k], 1 / largestContrast - 1);
    const factor = -bounded / (1 + (traces === 'single-layer' ? 0.5 : 1) * bounded);
    for (let a = 0; a < size; a++) {
      const weight = factor * vectors[k * size + a] * root[a];
      for (let b = 0; b < size; b++) map[a * size + b] += weight * vectors[k * size + b] * root[b];
    }
  }
  return betweenExponentials(map, N);
}

/**
 * The same to first order in the relative map, -D dR D: no bound, no trace, and noise in it is that of the data times fixed factors
 * (`HarmonicReader.exponentialVariances`).
 */
export function linearExponentialMatrix(relative: Float64Array, N: number): Float64Array {
  const size = 2 * N;
  const map = new Float64Array(size * size);
  for (let a = 0; a < size; a++) for (let b = 0; b < size; b++) map[a * size + b] = -(Math.floor(a / 2) + 1) * (Math.floor(b / 2) + 1) * relative[a * size + b];
  return betweenExponentials(map, N);
}

/** From cosines and sines over sqrt(pi), 2N x 2N, to e^{-i m theta}, e^{i n theta}. */
function betweenExponentials(map: Float64Array, N: number): Float64Array {
  const size = 2 * N;
  const out = new Float64Array(2 * N * N);
  for (let m = 0; m < N; m++) {
    for (let n = 0; n < N; n++) {
      const cc = map[2 * m * size + 2 * n];
      const ss = map[(2 * m + 1) * size + 2 * n + 1];
      const cs = map[2 * m * size + 2 * n + 1];
      const sc = map[(2 * m + 1) * size + 2 * n];
      out[m * N + n] = Math.PI * (cc + ss);
      out[N * N + m * N + n] = Math.PI * (cs - sc);
    }
  }
  return out;
}
