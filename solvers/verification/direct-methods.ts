import { besselJ } from '../core/bessel';
import { atan2 } from '../core/math';
import { bornImage, hermitianCoefficients } from '../methods/direct/born-image';
import { dBarSolver } from '../methods/direct/d-bar-solver';
import { exponentialMatrix } from '../methods/direct/harmonic-map';
import { largestTestValues, picardRatios } from '../methods/direct/indicators';
import { signedParts } from '../methods/direct/signed-parts';
import { digestOf, largestGap, relativeGap, type VerificationCheck } from './check';
import { concentricMap, concentricSensitivities, dipoleFunctions, firstOrderDisc } from './disc-maps';

/** Concentric disc of 2 in 1, half the radius: mu = 1/3. Harmonics up to 16. */
const rho = 0.5;
const s = 2;
const mu = (s - 1) / (s + 1);
const N = 16;

const eigenvalues = 'Exact map: D. Isaacson, Distinguishability of conductivities by electric current computed tomography, IEEE Trans. Med. Imaging MI-5 (1986) 91-95.';

const calderon: VerificationCheck = {
  key: 'calderon-concentric-disc',
  group: 'Methods',
  name: 'Calderón, concentric disc',
  line: 'change in the middle, s\u00a0=\u00a02, ρ\u00a0=\u00a00.5, transform cut at K\u00a0=\u00a06',
  published: '0.959513',
  unit: '',
  bound: 1e-10,
  reason: 'The quadrature over the frequencies is exact to rounding; harmonics above 16 add 1e-16.',
  source: {
    short: 'closed form',
    full: `Relative eigenvalues of the voltage-to-current map 2n(μρ²ⁿ + μ²ρ⁴ⁿ + ...) are those of first order of discs of radius ρʲ with the change 2μʲ, so the value is Σ 2μʲ(1 - J₀(Kρʲ)). ${eigenvalues}`,
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const coefficients = hermitianCoefficients(exponentialMatrix(concentricMap(rho, s, N), N), N);
    const row = bornImage(Float64Array.of(0, 0), N, 6);
    let measured = 0;
    for (let i = 0; i < row.length; i++) measured += row[i] * coefficients[i];
    const bessel = new Float64Array(1);
    let exact = 0;
    let power = 1;
    let radius = 6;
    for (let j = 0; j < 60; j++) {
      power *= mu;
      radius *= rho;
      besselJ(0, radius, bessel);
      exact += 2 * power * (1 - bessel[0]);
    }
    return { measured, gap: relativeGap(measured, exact), digest: digestOf(row, coefficients, measured) };
  },
};

/** Of tests/reference/make-d-bar.py: at the origin, at the centre of the disc, and at two other points, as x, y. */
const gridPoints = [0, 0, 0.35, 0.2, 0.1, 0.5, -0.6, -0.3];
const gridValues = [1.2245161665111852, 2.221083195509052, 1.2533564997845437, 1.032171803589182];

const dBar: VerificationCheck = {
  key: 'd-bar-square-grid',
  group: 'Methods',
  name: 'D-bar equation',
  line: 'σ in the middle of a disc of radius 0.3 at (0.35, 0.2), first-order transform of the change 0.8 cut at R\u00a0=\u00a04; the gap is over four points',
  published: '2.22108',
  unit: '',
  bound: 1e-3,
  reason: 'Both discretisations are good to about 3e-4; the value between the points of this one is interpolated.',
  source: {
    short: 'independent code, square grid',
    full: 'K. Knudsen, M. Lassas, J. L. Mueller, S. Siltanen, Regularized D-bar method for the inverse conductivity problem, Inverse Problems and Imaging 3 (2009) 599-624 (the equation, from memory). Values by the fast Fourier transform on square grids of 256 and 512 points a side with numpy and scipy, extrapolated.',
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const { values } = dBarSolver(Float64Array.from(gridPoints), 4).solve(firstOrderDisc(0.3, Math.sqrt(0.1625), atan2(0.2, 0.35), 0.8, N), N);
    return { measured: values[1], gap: largestGap(values, gridValues), digest: digestOf(values) };
  },
};

const monotonicity: VerificationCheck = {
  key: 'monotonicity-concentric-disc',
  group: 'Methods',
  name: 'Monotonicity test, concentric disc',
  line: 'largest test value of the disc itself, s\u00a0=\u00a02, ρ\u00a0=\u00a00.5',
  published: '0.615385',
  unit: '',
  bound: 1e-3,
  reason: 'The value is bracketed to five digits.',
  source: {
    short: 'closed form',
    full: `The map falls by (2/n)μρ²ⁿ/(1 + μρ²ⁿ), the disc's sensitivity is ρ²ⁿ/n: their least ratio, at n = 1, is 2μ/(1 + μρ²) = 8/13, above the (s - 1)/s that must pass (B. Harrach, M. Ullrich, SIAM J. Math. Anal. 45 (2013) 3382-3403). ${eigenvalues}`,
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const part = signedParts(concentricMap(rho, s, N), 2 * N, () => 1e-15).more;
    const measured = part ? largestTestValues(part, concentricSensitivities([rho], N), 1)[0] : NaN;
    return { measured, gap: relativeGap(measured, 8 / 13), digest: digestOf(measured) };
  },
};

const factorisation: VerificationCheck = {
  key: 'factorisation-concentric-disc',
  group: 'Methods',
  name: 'Factorisation, concentric disc',
  line: 'Picard ratio in the middle, s\u00a0=\u00a02, ρ\u00a0=\u00a00.5; the gap is over 0, 0.3 and 0.45',
  published: '0.153846',
  unit: '',
  bound: 1e-3,
  reason: 'The dipoles of a point are kept to 1e-6 of their squares.',
  source: {
    short: 'closed form',
    full: `Σ r²ⁿ⁻² over Σ r²ⁿ⁻²/λₙ, λₙ = (2/n)μρ²ⁿ/(1 + μρ²ⁿ); in the middle λ₁ = 2/13 (M. Brühl, M. Hanke, Inverse Problems 16 (2000) 1029-1042). ${eigenvalues}`,
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const part = signedParts(concentricMap(rho, s, N), 2 * N, () => 1e-15).more;
    const places = [0, 0.3, 0.45];
    const ratios = part ? picardRatios(part, dipoleFunctions(places.map((r) => [r, 1] as const), N)) : new Float64Array(3).fill(NaN);
    const exact = places.map((r) => {
      let top = 0;
      let bottom = 0;
      let power = 1;
      let inside = 1;
      for (let n = 1; n <= N; n++) {
        inside *= rho * rho;
        top += power;
        bottom += (power * n * (1 + mu * inside)) / (2 * mu * inside);
        power *= r * r;
      }
      return top / bottom;
    });
    return { measured: ratios[0], gap: largestGap(ratios, exact), digest: digestOf(ratios) };
  },
};

export const directMethodChecks: readonly VerificationCheck[] = [calderon, dBar, monotonicity, factorisation];
