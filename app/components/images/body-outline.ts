import type { Body } from '../../../shared/domain/body';
import { starRadius } from '../../../solvers/core/grid';

/** Distance from the centre to the edge of a body in a direction (radians counter-clockwise from x), m. For drawing. */
export function bodyReach(body: Body, angle: number): number {
  switch (body.kind) {
    case 'disc':
      return body.radius;
    case 'star':
      return starRadius(body, Math.cos(angle), Math.sin(angle));
    case 'rectangle': {
      const c = Math.abs(Math.cos(angle));
      const s = Math.abs(Math.sin(angle));
      return Math.min(c > 1e-12 ? body.width / 2 / c : Infinity, s > 1e-12 ? body.height / 2 / s : Infinity);
    }
    case 'interval':
      return (body.to - body.from) / 2;
  }
}

const steps = 180;

/** The edge as points, m, counter-clockwise from the x axis. */
export function bodyEdge(body: Body): [number, number][] {
  if (body.kind === 'rectangle') {
    const a = body.width / 2;
    const b = body.height / 2;
    return [[a, -b], [a, b], [-a, b], [-a, -b]];
  }
  return Array.from({ length: steps }, (_, k) => {
    const t = (2 * Math.PI * k) / steps;
    const r = bodyReach(body, t);
    return [r * Math.cos(t), r * Math.sin(t)];
  });
}

/** Half the width and half the height of the rectangle around the body, centred like its grid, m. */
export function bodyHalfSize(body: Body): [number, number] {
  if (body.kind === 'disc') return [body.radius, body.radius];
  if (body.kind === 'rectangle') return [body.width / 2, body.height / 2];
  if (body.kind === 'interval') return [(body.to - body.from) / 2, (body.to - body.from) / 2];
  const edge = bodyEdge(body);
  return [Math.max(...edge.map(([x]) => Math.abs(x))), Math.max(...edge.map(([, y]) => Math.abs(y)))];
}
