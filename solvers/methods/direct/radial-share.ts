import { cos, sin } from '../../core/math';
import { polarAngle, type ImpedanceBody } from '../../problems/electrical-impedance/body-curve';

/** Distance of a point of the body (m) from the origin as a share of the way to the rim. */
export function radialShare(body: ImpedanceBody, x: number, y: number): number {
  const distance = Math.sqrt(x * x + y * y) / body.radius;
  if (body.kind === 'disc') return distance;
  const theta = polarAngle(x, y);
  let rim = 1;
  for (let k = 1; k <= Math.max(body.cosine.length, body.sine.length); k++) rim += (body.cosine[k - 1] ?? 0) * cos(k * theta) + (body.sine[k - 1] ?? 0) * sin(k * theta);
  return distance / rim;
}
