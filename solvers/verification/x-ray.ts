import type { XrayGeometry } from '../../shared/domain/geometry/x-ray';
import type { TruthDefinition } from '../../shared/domain/truth-definition';
import { cos, exp, sin } from '../core/math';
import { deriveDrawKey } from '../core/random';
import { filteredProjection } from '../methods/projection/filtered-projection';
import { levelOfPhotons, poissonNoise } from '../noise/poisson';
import { rayIntegrals } from '../problems/x-ray/line-integrals';
import { siddon } from '../problems/x-ray/siddon';
import { xrayCells } from '../problems/x-ray/system-matrix';
import { createTruthField } from '../truth/truth-field';
import { digestOf, largestGap, relativeGap, type VerificationCheck } from './check';

const geometry: XrayGeometry = { body: { kind: 'disc', radius: 1 }, beam: 'parallel', views: 30, firstAngleDeg: 0, arcDeg: 180, detectors: 41, detectorSpacing: 1, cells: 20 };

/** Value, centre, half axes, angle: the table of 1974. */
const head: readonly (readonly [number, number, number, number, number, number])[] = [
  [2, 0, 0, 0.69, 0.92, 0], [-0.98, 0, -0.0184, 0.6624, 0.874, 0], [-0.02, 0.22, 0, 0.11, 0.31, -18], [-0.02, -0.22, 0, 0.16, 0.41, 18], [0.01, 0, 0.35, 0.21, 0.25, 0],
  [0.01, 0, 0.1, 0.046, 0.046, 0], [0.01, 0, -0.1, 0.046, 0.046, 0], [0.01, -0.08, -0.605, 0.046, 0.023, 0], [0.01, 0, -0.605, 0.023, 0.023, 0], [0.01, 0.06, -0.605, 0.023, 0.046, 0],
];

const headProjection: VerificationCheck = {
  key: 'shepp-logan-projection',
  group: 'Forward models',
  name: 'Projection of the Shepp-Logan head',
  line: 'the vertical line through its middle, by the code that simulates',
  published: '1.97426',
  unit: '',
  bound: 1e-12,
  reason: 'Rounding of some twenty pieces of the line.',
  source: {
    short: 'Shepp and Logan 1974',
    full: 'L. A. Shepp, B. F. Logan, The Fourier reconstruction of a head section, IEEE Trans. Nucl. Sci. 21 (1974) 21-43, table 1: 2 (2·0.92 - 0.98·0.874 + 0.01 (0.25 + 0.046 + 0.046 + 0.023)), the ellipses that the line meets.',
    fromMemory: true,
  },
  cost: 'light',
  run() {
    const definition: TruthDefinition = {
      kind: 'shapes', background: 0, combine: 'add',
      shapes: head.map(([value, x, y, semiAxisA, semiAxisB, angleDeg], i) => ({ kind: 'ellipse', label: String(i), target: false, value, x, y, semiAxisA, semiAxisB, angleDeg })),
    };
    const measured = rayIntegrals(createTruthField(definition), definition, geometry).integral({ nx: 1, ny: 0, offset: 0 });
    return { measured, gap: relativeGap(measured, 1.97426), digest: digestOf(measured) };
  },
};

const diagonal: VerificationCheck = {
  key: 'siddon-diagonal',
  group: 'Forward models',
  name: 'Lengths of a ray in cells',
  line: 'the diagonal through 20 × 20 cells over the unit disc: length in one inner cell; the gap is over all, ends cut by the circle',
  published: '0.141421356',
  unit: 'm',
  bound: 1e-12,
  reason: 'Rounding of the crossings.',
  source: { short: 'Siddon 1985', full: 'R. L. Siddon, Fast calculation of the exact radiological path for a three-dimensional CT array, Med. Phys. 12 (1985) 252-255. Along a diagonal every cell has √2 h, and the chord of the unit disc is 2.', fromMemory: true },
  cost: 'light',
  run() {
    const grid = xrayCells(geometry);
    const lengths = new Float64Array(400);
    siddon(grid, 1, { nx: -Math.SQRT1_2, ny: Math.SQRT1_2, offset: 0 }, (cell, length) => {
      lengths[cell] += length;
    });
    const exact = new Float64Array(400);
    for (let k = 0; k < 20; k++) {
      // Cell k lies between the radii |10 - k| and |9 - k| times √2 h from the middle.
      const far = Math.max(Math.abs(k - 10), Math.abs(k - 9)) * 0.1 * Math.SQRT2;
      const near = Math.min(Math.abs(k - 10), Math.abs(k - 9)) * 0.1 * Math.SQRT2;
      exact[21 * k] = Math.max(0, Math.min(1, far) - Math.min(1, near));
    }
    return { measured: lengths[21 * 8], gap: largestGap(lengths, exact), digest: digestOf(lengths) };
  },
};

/** Of scikit-image 0.19.3: iradon of two ellipses, 41 detector cells, 30 views, at (-12, 12), (-8, 8), ... (12, -12). */
const library: readonly number[] = [-0.0006005477508792503, -0.02318716713431799, 1.0087209167003914, 0.9828086082209372, 0.4059061914976698, -0.004028973622908358, -0.00020711336924413053];

const projection: VerificationCheck = {
  key: 'filtered-back-projection-library',
  group: 'Methods',
  name: 'Filtered back-projection',
  line: 'two ellipses in 30 parallel views of 41 detector cells, Ram-Lak filter: largest of seven values along a diagonal, the gap is over all',
  published: library[2].toFixed(9),
  unit: '',
  bound: 1e-9,
  reason: 'The same convolution by Fourier transform and by its sum, and the same linear interpolation: rounding, and 12 digits of the projections.',
  source: { short: 'scikit-image 0.19.3', full: 'Computed with skimage.transform.iradon of scikit-image 0.19.3, linear interpolation, from the closed-form projections of the ellipses (Kak and Slaney 1988, equations 3.1 to 3.4).' },
  cost: 'light',
  run() {
    const ellipses = [[1, 0, 0, 14, 10, 20], [-0.6, 4, -2, 3, 5, -35]] as const;
    const data = new Float64Array(30 * 41);
    const degree = Math.PI / 180;
    for (let view = 0; view < 30; view++)
      for (let cell = 0; cell < 41; cell++) {
        const angle = 6 * view;
        for (const [rho, x, y, a, b, turn] of ellipses) {
          const u = a * cos((angle - turn) * degree);
          const v = b * sin((angle - turn) * degree);
          const square = u * u + v * v;
          const offset = cell - 20 - x * cos(angle * degree) - y * sin(angle * degree);
          if (square > offset * offset) data[41 * view + cell] += (2 * rho * a * b * Math.sqrt(square - offset * offset)) / square;
        }
      }
    const points = Float64Array.from({ length: 14 }, (_, k) => (k % 2 === 0 ? 4 * (k >> 1) - 12 : 12 - 4 * (k >> 1)));
    const values = filteredProjection(geometry, 'ram-lak', 1).at(data, points);
    return { measured: values[2], gap: largestGap(values, library), digest: digestOf(values) };
  },
};

const photons: VerificationCheck = {
  key: 'photon-variance',
  group: 'Randomness and hashes',
  name: 'Noise of photon counts',
  line: '4,000 rays of attenuation 1 with 10,000 photons each: variance of the line integral times the photons',
  published: '2.71828',
  unit: '',
  bound: 0.12,
  reason: 'Five standard errors of a variance over 4,000 values are 11 %; relative.',
  source: { short: 'Kak and Slaney 1988', full: 'A. C. Kak, M. Slaney, Principles of Computerized Tomographic Imaging, IEEE Press, 1988, section 5.2: the variance of the logarithm of a count is one over its mean, here exp(1) / N.', fromMemory: true },
  cost: 'light',
  run() {
    const clean = new Float64Array(4000).fill(1);
    const { data } = poissonNoise.draw(clean, levelOfPhotons(clean, 1e4, 1), 1, deriveDrawKey('verification', 'photons', 0, 0));
    let sum = 0;
    for (let i = 0; i < data.length; i++) sum += (data[i] - 1) * (data[i] - 1);
    const measured = (1e4 * sum) / data.length;
    return { measured, gap: relativeGap(measured, exp(1)), digest: digestOf(data) };
  },
};

export const xrayChecks: readonly VerificationCheck[] = [headProjection, diagonal, projection, photons];
