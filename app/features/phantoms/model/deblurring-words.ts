import type { EdgeKey, PointSpreadKey } from '../../../../shared/domain/geometry/deblurring';

export const pointSpreadNames: Record<PointSpreadKey, string> = { gaussian: 'Gaussian', disc: 'disc (out of focus)', motion: 'motion' };
export const spreadNames: Record<PointSpreadKey, { readonly name: string; readonly help: string }> = {
  gaussian: { name: 'Standard deviation', help: 'Of the Gaussian:' },
  disc: { name: 'Radius of the disc', help: 'Of a point out of focus:' },
  motion: { name: 'Half the length', help: 'Of the way moved during exposure:' },
};
export const edgeNames: Record<EdgeKey, string> = { zero: 'nothing there (zero)', periodic: 'the picture repeats', reflective: 'the picture is mirrored' };
