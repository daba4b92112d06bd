import { gridGeometry } from './grid-geometry';
import { defineMetric, relativeTo } from './metric-definition';

export const relativeH1Error = defineMetric({
  key: 'relative-h1-error',
  name: 'Relative H1 seminorm error',
  short: 'Relative H1',
  unit: '',
  better: 'lower',
  formula: 'E_{H^1} = \\frac{|\\hat x - x|_{1}}{|x - x_b|_{1}}, \\quad |v|_1^2 = \\sum_{i \\sim j} \\frac{\\ell_{ij}}{d_{ij}} (v_i - v_j)^2',
  summary: 'The gradient of the error against the gradient of what there was to find, over pairs of neighbouring pixels inside the body. The trivial reconstruction scores exactly 1.',
  sources: [{ short: 'common practice', full: 'The discrete form of the integral of the squared gradient by differences of neighbouring pixels. Common practice, no source.' }],
  traps: [
    'A sharp edge has no finite H1 seminorm: the figure depends on the pixel size, so compare on one grid only.',
    'Blind to an offset of the whole image.',
  ],
  fromSummary: ({ input: { truth, estimate, background, grid } }) => {
    const { insideIndex } = gridGeometry(grid);
    const { nx, ny, inside } = grid;
    const stepX = (grid.xMax - grid.xMin) / nx;
    const stepY = (grid.yMax - grid.yMin) / ny;
    const along = stepY / stepX;
    const up = stepX / stepY;
    let error = 0;
    let signal = 0;
    for (let k = 0; k < inside.length; k++) {
      const pixel = inside[k];
      const ek = estimate[k] - truth[k];
      const sk = truth[k] - background[k];
      const right = pixel % nx < nx - 1 ? insideIndex[pixel + 1] : -1;
      if (right >= 0) {
        const e = estimate[right] - truth[right] - ek;
        const s = truth[right] - background[right] - sk;
        error += along * (e * e);
        signal += along * (s * s);
      }
      const above = pixel + nx < nx * ny ? insideIndex[pixel + nx] : -1;
      if (above >= 0) {
        const e = estimate[above] - truth[above] - ek;
        const s = truth[above] - background[above] - sk;
        error += up * (e * e);
        signal += up * (s * s);
      }
    }
    return relativeTo(Math.sqrt(error), Math.sqrt(signal));
  },
});
