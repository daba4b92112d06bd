/** Filtered back-projection of parallel and flat-detector fan beams. */
import type { XrayGeometry } from '../../../shared/domain/geometry/x-ray';
import { atan, sin } from '../../core/math';
import { detectorCentre, directionOf, fanDistances, viewAngles } from '../../problems/x-ray/rays';
import { rampKernel, type WindowKey } from './ramp-kernels';

/**
 * Share of its line integral that each ray contributes (views x detectors): the shares of rays along one line sum to 1. Over a full turn every
 * line is seen twice; over less, lines seen twice are shared smoothly, with nothing at the ends of the arc. For a fan over half a turn and
 * the fan's angle these are the weights of Parker 1982; lines seen once have 1.
 */
export function redundancyWeights(geometry: XrayGeometry): Float64Array {
  const { views, detectors, arcDeg, beam } = geometry;
  const out = new Float64Array(views * detectors);
  if (arcDeg >= 360 - 1e-9) return out.fill(0.5);
  const step = arcDeg / views;
  const toEnd = (angle: number): number => Math.min(angle, arcDeg - angle);
  for (let cell = 0; cell < detectors; cell++) {
    let fanDeg = 0;
    if (beam === 'fan') {
      const { source, detector } = fanDistances(geometry);
      fanDeg = (atan(detectorCentre(geometry, cell) / (source + detector)) * 180) / Math.PI;
    }
    for (let view = 0; view < views; view++) {
      // A view stands for the step around it, so that the ends of the arc are half a step beyond the first and the last.
      const own = (view + 0.5) * step;
      // The same line from the other side: beta + 180 degrees - 2 gamma, up to full turns.
      let opposite = own + 180 - 2 * fanDeg;
      opposite -= 360 * Math.floor(opposite / 360);
      let weight = 1;
      if (opposite < arcDeg) {
        const a = toEnd(own);
        const s = sin((Math.PI / 2) * (a / (a + toEnd(opposite))));
        weight = s * s;
      }
      out[view * detectors + cell] = weight;
    }
  }
  return out;
}

export interface FilteredProjection {
  /** Back-projected values at points (x, y pairs, m) of a frame of line integrals (views x detectors). Not clipped. */
  at(data: Float64Array, points: Float64Array): Float64Array;
}

/**
 * Convolution with the windowed ramp, then the sum over the views (Kak and Slaney 1988: equations 3.36 to 3.43 for parallel beams, 3.122 to
 * 3.126 for the flat detector of a fan, moved to the centre). Linear interpolation between detector cells, 0 beyond the detector.
 * @param cutoff share of the highest frequency that the detector resolves, in (0, 1]
 */
export function filteredProjection(geometry: XrayGeometry, window: WindowKey, cutoff: number): FilteredProjection {
  const { views, detectors, arcDeg, beam } = geometry;
  const { source, detector } = beam === 'fan' ? fanDistances(geometry) : { source: 1, detector: 0 };
  // The detector as seen at the centre.
  const step = (geometry.detectorSpacing * source) / (source + detector);
  const kernel = rampKernel(window, step, detectors, cutoff);
  const weights = redundancyWeights(geometry);
  const angle = (arcDeg * Math.PI) / 180 / views;
  for (let k = 0; k < weights.length; k++) {
    const s = ((k % detectors) - (detectors - 1) / 2) * step;
    weights[k] *= beam === 'fan' ? source / Math.sqrt(source * source + s * s) : 1;
  }
  const directions = viewAngles(geometry).map(directionOf);
  return {
    at(data, points) {
      const out = new Float64Array(points.length / 2);
      const filtered = new Float64Array(detectors);
      for (let view = 0; view < views; view++) {
        const from = view * detectors;
        for (let i = 0; i < detectors; i++) {
          let sum = 0;
          for (let k = 0; k < detectors; k++) sum += kernel[i < k ? k - i : i - k] * weights[from + k] * data[from + k];
          filtered[i] = sum * step * angle;
        }
        const [c, s] = directions[view];
        for (let p = 0; p < out.length; p++) {
          const along = c * points[2 * p] + s * points[2 * p + 1];
          let place = along;
          let scale = 1;
          if (beam === 'fan') {
            const across = c * points[2 * p + 1] - s * points[2 * p];
            const ratio = source / (source - along);
            place = across * ratio;
            scale = ratio * ratio;
          }
          const index = place / step + (detectors - 1) / 2;
          const low = Math.floor(index);
          if (low < 0 || low + 1 >= detectors) {
            if (index === detectors - 1) out[p] += scale * filtered[detectors - 1];
            continue;
          }
          const share = index - low;
          out[p] += scale * (filtered[low] + share * (filtered[low + 1] - filtered[low]));
        }
      }
      return out;
    },
  };
}

/** Points to a cell side in the mean over a cell: as fine as the detector, 4 at most. */
export function pointsPerSide(cell: number, detectorStep: number): number {
  return Math.max(1, Math.min(4, Math.ceil(cell / detectorStep - 1e-9)));
}
