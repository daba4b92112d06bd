import { z } from 'zod';
import { discBodySchema, starBodySchema } from '../body';
import { starOutline } from '../star-outline';

/** Numbers of electrodes that forms offer; any even number from the first to the last is served. */
export const electrodeCounts = [8, 12, 16, 24, 32, 48, 64] as const;
export const patternKeys = ['adjacent', 'skip', 'opposite', 'trigonometric', 'listed'] as const;
export type PatternKey = (typeof patternKeys)[number];
export const measurementKeys = ['adjacent-undriven', 'adjacent-all', 'electrode-voltages'] as const;
export type MeasurementKey = (typeof measurementKeys)[number];
export const eitLimits = {
  /** Rows of a listed matrix of currents. */
  patterns: 128,
  /** Smallest gap between two electrodes, as a share of the boundary over their number. */
  gap: 0.05,
} as const;

const impedance = z.number().min(1e-7, 'At least 1e-7 ohm m².').max(10, 'At most 10 ohm m².');

/**
 * Complete electrode model on a disc or a star-shaped body. Electrode 1 is centred at `firstElectrodeDeg`, the polar angle about the
 * origin; the others follow clockwise or counter-clockwise at equal spacing along the boundary. `electrodeCoverage` is the share of
 * the boundary under all electrodes, which are equally wide. Optional fields are absent where they are not used.
 */
export const eitGeometrySchema = z
  .strictObject({
    body: z.discriminatedUnion('kind', [discBodySchema, starBodySchema]),
    electrodes: z.int().min(8, 'At least 8 electrodes.').max(64, 'At most 64 electrodes.').multipleOf(2, 'An even number of electrodes.'),
    electrodeCoverage: z.number().min(0.1, 'At least 10 % of the boundary.').max(0.9, 'At most 90 % of the boundary.'),
    firstElectrodeDeg: z.number().min(-360).max(360).default(90),
    numbering: z.enum(['clockwise', 'counter-clockwise']).default('clockwise'),
    /** Polar angles of the centres, one an electrode, once round in the direction of `numbering`; `firstElectrodeDeg` is not read then. */
    electrodeAnglesDeg: z.array(z.number().min(-720).max(720)).optional(),
    /** One value, or one an electrode, ohm m^2. */
    contactImpedance: z.union([impedance, z.array(impedance)]),
    pattern: z.enum(patternKeys),
    /** With 'skip': electrodes left out between the two driven ones. */
    skip: z.int().min(1, 'At least 1: with 0 the pattern is adjacent.').max(30).optional(),
    /** With 'listed': one row a pattern, one value an electrode, as multiples of `current`. */
    currents: z.array(z.array(z.number().min(-1000).max(1000))).min(1, 'At least one pattern.').max(eitLimits.patterns, `At most ${eitLimits.patterns} patterns.`).optional(),
    /** Amplitude of the current per unit height, A/m. */
    current: z.number().positive().max(100),
    measurement: z.enum(measurementKeys),
  })
  .superRefine((g, ctx) => {
    const fault = (path: (string | number)[], message: string) => ctx.addIssue({ code: 'custom', path, message });
    const L = g.electrodes;
    if (g.pattern === 'trigonometric' && g.measurement === 'adjacent-undriven')
      fault(['measurement'], 'Trigonometric patterns drive every electrode: measure all adjacent pairs or all electrode voltages.');
    if (Array.isArray(g.contactImpedance) && g.contactImpedance.length !== L) fault(['contactImpedance'], `${L} electrodes need one contact impedance or ${L} of them, not ${g.contactImpedance.length}.`);
    if (g.pattern === 'skip') {
      if (g.skip === undefined) fault(['skip'], 'State how many electrodes are skipped between the driven ones.');
      else if (g.skip > L / 2 - 2) fault(['skip'], `At most ${L / 2 - 2} of ${L} electrodes can be skipped; with ${L / 2 - 1} the pattern is opposite.`);
    } else if (g.skip !== undefined) fault(['skip'], 'Only the skip pattern skips electrodes.');
    if (g.pattern === 'listed') {
      if (g.currents === undefined) fault(['currents'], 'List the currents: one row a pattern, one value an electrode.');
      else g.currents.forEach((row, k) => currentsFault(row, k, L, g.measurement, fault));
    } else if (g.currents !== undefined) fault(['currents'], 'Only the listed pattern has a list of currents.');
    if (g.electrodeAnglesDeg !== undefined) anglesFault(g.electrodeAnglesDeg, g, fault);
  });
export type EitGeometry = z.infer<typeof eitGeometrySchema>;
type Fault = (path: (string | number)[], message: string) => void;

function currentsFault(row: readonly number[], k: number, L: number, measurement: MeasurementKey, fault: Fault): void {
  if (row.length !== L) return fault(['currents', k], `Row ${k + 1} has ${row.length} values, not one for each of ${L} electrodes.`);
  const largest = Math.max(...row.map(Math.abs));
  const sum = row.reduce((total, value) => total + value, 0);
  if (largest === 0) fault(['currents', k], `Row ${k + 1} drives no current.`);
  // What rounding of decimals leaves.
  else if (Math.abs(sum) > 1e-9 * largest) fault(['currents', k], `The currents of row ${k + 1} must sum to zero, not ${Number(sum.toPrecision(6))}.`);
  else if (measurement === 'adjacent-undriven' && !row.some((value, l) => value === 0 && row[(l + 1) % L] === 0))
    fault(['measurement'], `Row ${k + 1} leaves no adjacent pair of electrodes undriven: measure all adjacent pairs or all electrode voltages.`);
}

function anglesFault(angles: readonly number[], g: { body: z.infer<typeof discBodySchema> | z.infer<typeof starBodySchema>; electrodes: number; electrodeCoverage: number; numbering: 'clockwise' | 'counter-clockwise' }, fault: Fault): void {
  const L = g.electrodes;
  const path = ['electrodeAnglesDeg'];
  if (angles.length !== L) return fault(path, `List ${L} angles, one an electrode, not ${angles.length}.`);
  const outline = g.body.kind === 'star' ? starOutline(g.body.cosine, g.body.sine) : starOutline([], []);
  const pitch = outline.length / L;
  const sign = g.numbering === 'clockwise' ? -1 : 1;
  let turn = 0;
  for (let l = 0; l < L; l++) {
    const from = angles[l] ?? 0;
    const to = angles[(l + 1) % L] ?? 0;
    const step = sign * (to - from);
    const degrees = step - 360 * Math.floor(step / 360);
    turn += degrees;
    const along = sign * (outline.arcLength((to * Math.PI) / 180) - outline.arcLength((from * Math.PI) / 180));
    const gap = along - outline.length * Math.floor(along / outline.length) - g.electrodeCoverage * pitch;
    // The last bits of an angle decide nothing.
    if (gap < (eitLimits.gap - 1e-6) * pitch) return fault([...path, (l + 1) % L], `Electrodes ${l + 1} and ${((l + 1) % L) + 1} overlap or nearly touch: the gap between them must be at least ${100 * eitLimits.gap} % of the mean spacing.`);
  }
  if (turn > 361) fault(path, `The angles must go once round the body, ${g.numbering}.`);
}
