import { formatCount, formatNumber, formatPercent, formatQuantity } from '../../../lib/format';
import { noiseReferenceWords, plainNumber, withUnit } from '../../../lib/problem-words';
import type { PhantomDetail } from '../../../../shared/contracts/phantoms';
import type { Simulation } from '../../../../shared/contracts/simulations';
import { familyNames, type FamilyKey } from '../../../../shared/domain/families';
import type { DeblurringGeometry } from '../../../../shared/domain/geometry/deblurring';
import type { EitGeometry } from '../../../../shared/domain/geometry/electrical-impedance';
import type { IntegralEquationGeometry } from '../../../../shared/domain/geometry/integral-equation';
import type { XrayGeometry } from '../../../../shared/domain/geometry/x-ray';
import type { ReadableDefinition } from '../../../../shared/domain/phantom-definition';
import type { Shape } from '../../../../shared/domain/truth-definition';
import { bodyCurve } from '../../../../solvers/problems/electrical-impedance/body-curve';
import { equationOf } from '../../../../solvers/problems/integral-equation/equations';
import { edgeNames, pointSpreadNames, spreadNames } from './deblurring-words';
import { electrodeWidth, frameFacts, measurementNames, patternWords } from './geometry-facts';

type Facts = [string, string][];
const mm = (metres: number): string => plainNumber(metres * 1000);
const degrees = (value: number): string => `${plainNumber(value)}°`;

/** Value and size of a shape: '2.00 S/m, 81 × 60 mm'. */
export function shapeFact(shape: Shape, family: FamilyKey): string {
  const value = withUnit(formatNumber(shape.value, 3), familyNames[family].valueUnit);
  if (shape.kind === 'polygon') return `${value}, ${shape.vertices.length} corners`;
  if (shape.kind === 'annulus') return `${value}, ${mm(2 * shape.innerRadius)} to ${mm(2 * shape.outerRadius)} mm across`;
  return `${value}, ${mm(2 * shape.semiAxisA)} × ${mm(2 * shape.semiAxisB)} mm`;
}

function impedanceRange(z: EitGeometry['contactImpedance']): string {
  if (!Array.isArray(z)) return `${formatNumber(z, 2)} Ω m²`;
  return `${formatNumber(Math.min(...z), 2)} to ${formatNumber(Math.max(...z), 2)} Ω m², one each`;
}

function eitFacts(g: EitGeometry): Facts {
  const frame = frameFacts(g);
  const width = electrodeWidth(bodyCurve(g).length, g.electrodes, g.electrodeCoverage);
  return [
    ['Domain', g.body.kind === 'disc' ? `disc, diameter ${mm(2 * g.body.radius)} mm` : `smooth outline, mean diameter ${mm(2 * g.body.radius)} mm`],
    ['Electrodes', `${g.electrodes}, each ${mm(width)} mm wide${g.electrodeAnglesDeg ? ', at listed angles' : ''}`],
    ['Contact impedance', impedanceRange(g.contactImpedance)],
    ['Drive pattern', `${patternWords(g)}, ${formatQuantity(g.current, 'A', 2)} per m of height`],
    ['Measured between', measurementNames[g.measurement].toLowerCase()],
    ['Measurements', `${formatCount(frame.values)} per frame`],
  ];
}

function xrayFacts(g: XrayGeometry): Facts {
  return [
    ['Domain', `disc, diameter ${mm(2 * g.body.radius)} mm`],
    ['Beam', g.beam === 'parallel' ? 'parallel' : `fan, source at ${mm(g.sourceDistance ?? 0)} mm, detector ${mm(g.detectorDistance ?? 0)} mm beyond the centre`],
    ['Views', `${g.views}, from ${degrees(g.firstAngleDeg)} over ${degrees(g.arcDeg)}`],
    ['Detector', `${g.detectors} cells of ${mm(g.detectorSpacing)} mm`],
    ['Rays', formatCount(g.views * g.detectors)],
    ['Unknowns', `${g.cells} × ${g.cells} cells over the body`],
  ];
}

function equationFacts(g: IntegralEquationGeometry): Facts {
  const equation = equationOf(g);
  return [
    ['Equation', equation.name],
    ['Models', equation.line],
    ['Interval', `${plainNumber(equation.from)} to ${plainNumber(equation.to)}`],
    ['Unknowns', `${g.cells} cells`],
    ['Data', `${g.points} points`],
    ...(g.depth === undefined ? [] : [['Depth', plainNumber(g.depth)] as [string, string]]),
    ...(g.diffusivity === undefined ? [] : [['Stiffness', plainNumber(g.diffusivity)] as [string, string]]),
    ['Source', equation.sources.map((s) => s.short).join('; ')],
  ];
}

function deblurringFacts(g: DeblurringGeometry): Facts {
  return [
    ['Picture', `${mm(g.body.width)} × ${mm(g.body.height)} mm`],
    ['Point-spread function', pointSpreadNames[g.pointSpread]],
    [spreadNames[g.pointSpread].name, `${mm(g.spread)} mm`],
    ...(g.pointSpread === 'motion' ? [['Direction', degrees(g.motionDeg ?? 0)] as [string, string]] : []),
    ['Pixels', `${g.cells} along the longer side`],
    ['Beyond the edge', `${edgeNames[g.edge]}, in the inversion`],
  ];
}

export function geometryFacts(definition: ReadableDefinition): Facts {
  switch (definition.family) {
    case 'electrical-impedance':
      return eitFacts(definition.geometry);
    case 'x-ray':
      return xrayFacts(definition.geometry);
    case 'integral-equation':
      return equationFacts(definition.geometry);
    case 'deblurring':
      return deblurringFacts(definition.geometry);
  }
}

function truthFacts(definition: ReadableDefinition): Facts {
  const { truth, family } = definition;
  if (truth?.kind === 'shapes') {
    const facts: Facts = truth.shapes.slice(0, 6).map((shape) => [shape.label.charAt(0).toUpperCase() + shape.label.slice(1), shapeFact(shape, family)]);
    if (truth.shapes.length > 6) facts.push(['Other shapes', String(truth.shapes.length - 6)]);
    if ('combine' in truth && truth.combine === 'add') facts.push(['Overlapping shapes', 'their values add']);
    return facts;
  }
  if (truth?.kind === 'array') return [['Truth from', `an array of ${truth.rows} × ${truth.cols}`]];
  if (truth?.kind === 'standard') return [['Truth', 'the published solution']];
  return [];
}

/** The facts beside the pictures. */
export function phantomFacts(detail: PhantomDetail, simulation: Simulation | undefined): Facts {
  const { version } = detail;
  const { definition } = version;
  const impedance = definition.family === 'electrical-impedance';
  const facts = geometryFacts(definition);
  if (simulation) facts.push(['Simulated by', impedance ? `${simulation.simulation.kind}, ${formatCount(simulation.simulation.unknowns)} unknowns` : simulation.simulation.kind]);
  if (version.modelErrorFloor !== null) facts.push(['Model-error floor', `${formatPercent(version.modelErrorFloor)}${simulation ? `, against ${formatCount(simulation.inversion.cells)} cells` : ''}`]);
  if (impedance) facts.push(['Data', definition.dataKind === 'difference' ? 'difference to the background' : 'absolute']);
  facts.push(['Noise is relative to', noiseReferenceWords[definition.noiseReference]], ...truthFacts(definition));
  const background = definition.truth?.background ?? simulation?.background;
  if (background !== undefined) facts.push(['Trivial answer', `${withUnit(formatNumber(background, 3), familyNames[definition.family].valueUnit)} everywhere`]);
  return facts;
}

/** How to cite a version. */
export function citation(detail: PhantomDetail): { group: string; year: number; title: string; rest: string } {
  const year = new Date(detail.version.publishedAt ?? detail.version.createdAt).getFullYear();
  return { group: detail.group.name, year, title: detail.version.name, rest: `version ${detail.version.n}. Hadamark phantom ${detail.id}.` };
}
