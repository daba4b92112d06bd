import { formatCount, formatNumber, formatPercent, formatQuantity } from '../../../lib/format';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { Shape } from '../../../../shared/domain/truth-definition';
import { electrodeWidth, frameFacts, measurementNames } from './geometry-facts';

const mm = (metres: number): string => formatNumber(metres * 1000, 3);

/** Name and value of a shape: '2.00 S/m, 81 × 60 mm'. */
export function shapeFact(shape: Shape): string {
  const value = `${formatNumber(shape.value, 3)} S/m`;
  if (shape.kind === 'polygon') return `${value}, ${shape.vertices.length} corners`;
  if (shape.kind === 'annulus') return `${value}, ${mm(2 * shape.innerRadius)} to ${mm(2 * shape.outerRadius)} mm across`;
  return `${value}, ${mm(2 * shape.semiAxisA)} × ${mm(2 * shape.semiAxisB)} mm`;
}

export const noiseReferenceWords = { voltages: 'the raw voltages', difference: 'the difference signal' } as const;

export function geometryFacts(geometry: EitGeometry): [string, string][] {
  const frame = frameFacts(geometry.electrodes, geometry.pattern, geometry.measurement);
  const width = electrodeWidth(geometry.body.radius, geometry.electrodes, geometry.electrodeCoverage);
  return [
    ['Domain', `disc, diameter ${mm(2 * geometry.body.radius)} mm`],
    ['Electrodes', `${geometry.electrodes}, each ${mm(width)} mm wide`],
    ['Contact impedance', `${formatNumber(geometry.contactImpedance, 2)} Ω m²`],
    ['Drive pattern', `${geometry.pattern === 'adjacent' ? 'adjacent pairs' : 'trigonometric'}, ${formatQuantity(geometry.current, 'A', 2)} per m of height`],
    ['Measured between', measurementNames[geometry.measurement].toLowerCase()],
    ['Measurements', `${frame.values} per frame`],
  ];
}

/** The facts beside the pictures. */
export function phantomFacts(detail: PhantomDetail, simulation: Simulation | undefined): [string, string][] {
  const { version } = detail;
  const { geometry, truth, dataKind, noiseReference } = version.definition;
  const facts = geometryFacts(geometry);
  if (simulation) facts.push(['Data mesh', `${formatCount(simulation.simulation.elements)} elements, ${simulation.simulation.kind}`]);
  if (version.modelErrorFloor !== null) facts.push(['Model-error floor', `${formatPercent(version.modelErrorFloor)}${simulation ? `, against ${formatCount(simulation.inversion.cells)} cells` : ''}`]);
  facts.push(['Data', dataKind === 'difference' ? 'difference to the background' : 'absolute'], ['Noise is relative to', noiseReferenceWords[noiseReference]]);
  if (truth?.kind === 'shapes') for (const shape of truth.shapes.slice(0, 6)) facts.push([shape.label.charAt(0).toUpperCase() + shape.label.slice(1), shapeFact(shape)]);
  if (truth?.kind === 'array') facts.push(['Truth from', `an array of ${truth.rows} × ${truth.cols}`]);
  if (truth) facts.push(['Trivial answer', `${formatNumber(truth.background, 3)} S/m everywhere`]);
  else if (simulation) facts.push(['Trivial answer', `${formatNumber(simulation.background, 3)} S/m everywhere`]);
  return facts;
}

/** How to cite a version. */
export function citation(detail: PhantomDetail): { group: string; year: number; title: string; rest: string } {
  const year = new Date(detail.version.publishedAt ?? detail.version.createdAt).getFullYear();
  return { group: detail.group.name, year, title: detail.version.name, rest: `version ${detail.version.n}. Hadamark phantom ${detail.id}.` };
}
