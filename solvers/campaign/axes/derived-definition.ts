import type { AxisKey } from '../../../shared/domain/axes';
import type { EitGeometry } from '../../../shared/domain/geometry/electrical-impedance';
import { phantomDefinitionSchema, type DefinitionOf, type PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { contentHash } from '../../core/hash';
import { atan2, exp, ln } from '../../core/math';
import { deriveKey, RandomStream } from '../../core/random';
import { electrodeFrame } from '../../problems/electrical-impedance/electrodes';

/**
 * The experiment of one level of an axis: what is simulated in place of the definition. The inversion keeps the model of the definition
 * itself, so every difference between the two is an error that it is not told. Axes that only lose data change nothing here.
 * @throws RangeError where the axis does not serve the family, or the changed experiment is not admissible
 */
export function derivedDefinition(definition: PhantomDefinition, axis: AxisKey, level: number): PhantomDefinition {
  switch (axis) {
    case 'noise':
    case 'missing-angles':
    case 'missing-channels':
      return definition;
    case 'contrast':
      return admissible({ ...definition, truth: scaledTruth(definition, level) });
    case 'electrode-displacement': {
      const { geometry } = impedance(definition, axis);
      return admissible({ ...definition, geometry: { ...geometry, electrodeAnglesDeg: displacedAngles(geometry, level, contentHash(definition)) } });
    }
    case 'contact-impedance': {
      const { geometry } = impedance(definition, axis);
      const { contactImpedance: z } = geometry;
      return admissible({ ...definition, geometry: { ...geometry, contactImpedance: Array.isArray(z) ? z.map((value) => value * (1 + level)) : z * (1 + level) } });
    }
    case 'body-outline': {
      const { geometry } = impedance(definition, axis);
      const { body } = geometry;
      const cosine = body.kind === 'star' ? [...body.cosine] : [];
      while (cosine.length < 2) cosine.push(0);
      cosine[1] = (cosine[1] ?? 0) + level;
      return admissible({ ...definition, geometry: { ...geometry, body: { kind: 'star', radius: body.radius, cosine, sine: body.kind === 'star' ? [...body.sine] : [] } } });
    }
  }
}

function impedance(definition: PhantomDefinition, axis: AxisKey): DefinitionOf<'electrical-impedance'> {
  if (definition.family !== 'electrical-impedance') throw new RangeError(`The axis '${axis}' needs electrodes; this phantom has none.`);
  return definition;
}

/** Reads a changed definition as if it had been sent: its limits hold for every level. */
function admissible(definition: unknown): PhantomDefinition {
  const read = phantomDefinitionSchema.safeParse(definition);
  if (read.success) return read.data;
  const { path, message } = read.error.issues[0];
  throw new RangeError(`This level of the axis is not admissible at ${path.join('.')}: ${message}`);
}

/** Values moved away from the background: the logarithms of conductivities times the factor, other values themselves. */
function scaledTruth(definition: PhantomDefinition, factor: number): unknown {
  const { truth } = definition;
  const b = truth.background;
  const logarithmic = definition.family === 'electrical-impedance';
  const scaled = (value: number): number => (logarithmic ? b * exp(factor * ln(value / b)) : b + factor * (value - b));
  switch (truth.kind) {
    case 'shapes': {
      const adds = 'combine' in truth && truth.combine === 'add';
      return { ...truth, shapes: truth.shapes.map((shape) => ({ ...shape, value: adds ? factor * shape.value : scaled(shape.value) })) };
    }
    case 'expression':
      return { ...truth, expression: logarithmic ? `${b} * ((${truth.expression}) / ${b})^${factor}` : `${b} + ${factor} * ((${truth.expression}) - (${b}))` };
    case 'array':
      // A stored array has no logarithm: its values themselves move, and the simulation refuses those that are not positive.
      return { ...truth, scale: factor * truth.scale, offset: b + factor * (truth.offset - b) };
    case 'standard':
      throw new RangeError('The published solution of an equation has a fixed size: there is no contrast to vary.');
  }
}

/** Electrodes stay this share of their spacing apart. */
const gap = 0.06;

/**
 * Angles of displaced electrodes, degrees: each moves along the boundary by a normal number times level times the spacing, the same numbers at every
 * level; a move that would bring it nearer than the gap to the middle between neighbours is cut there.
 */
function displacedAngles(geometry: EitGeometry, level: number, seed: string): number[] {
  const frame = electrodeFrame(geometry);
  const random = new RandomStream(deriveKey('hadamark electrodes 1', seed));
  const pitch = frame.boundary.length / geometry.electrodes;
  const most = 0.5 * (1 - geometry.electrodeCoverage - gap);
  if (most <= 0) throw new RangeError('The electrodes cover so much of the boundary that none of them can move.');
  const degree = 180 / 3.141592653589793;
  const first = geometry.electrodeAnglesDeg?.[0] ?? geometry.firstElectrodeDeg;
  return Array.from(frame.centres, (centre) => {
    const share = Math.max(-most, Math.min(most, level * random.nextNormal()));
    const [x, y] = frame.boundary.pointAt(centre + share * pitch);
    return first + atan2(y, x) * degree;
  });
}
