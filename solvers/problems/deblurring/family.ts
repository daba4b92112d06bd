import type { DeblurringGeometry } from '../../../shared/domain/geometry/deblurring';
import type { ProblemFamily } from '../problem-family';
import { createDeblurringInversion } from './inversion-problem';
import { pictureGrid, pictureOf } from './picture';
import { simulateDeblurring } from './simulated-phantom';

const spreadWords = {
  gaussian: (g: DeblurringGeometry) => `Gaussian blur of deviation ${g.spread} m`,
  disc: (g: DeblurringGeometry) => `blur by a disc of radius ${g.spread} m`,
  motion: (g: DeblurringGeometry) => `motion blur of ${2 * g.spread} m at ${g.motionDeg ?? 0}°`,
} as const;

export const deblurringFamily: ProblemFamily<'deblurring'> = {
  create: ({ geometry, background }) => createDeblurringInversion(geometry, background),
  simulate: simulateDeblurring,
  grid: pictureGrid,
  unknowns(geometry) {
    const { nx, ny } = pictureOf(geometry);
    return nx * ny;
  },
  line({ geometry }) {
    const { nx, ny } = pictureOf(geometry);
    return `${spreadWords[geometry.pointSpread](geometry)}, ${nx} x ${ny} pixels, ${geometry.edge} edge`;
  },
  layout(geometry) {
    const { nx, ny } = pictureOf(geometry);
    const columns = Array.from({ length: nx }, (_, j) => `column ${j + 1}`);
    return { unit: '', groupNames: Array.from({ length: ny }, (_, i) => `row ${i + 1}`), valueNames: Array.from({ length: ny }, () => columns) };
  },
};
