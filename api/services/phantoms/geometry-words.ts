import type { DefinitionOf, PhantomDefinition } from '../../../shared/domain/phantom-definition';
import { equationOf } from '../../../solvers/problems/integral-equation/equations';

const percent = (share: number): number => Number((100 * share).toPrecision(4));

function electrodes({ geometry: g }: DefinitionOf<'electrical-impedance'>): string[] {
  const z = Array.isArray(g.contactImpedance) ? `contact impedances of ${Math.min(...g.contactImpedance)} to ${Math.max(...g.contactImpedance)} ohm m^2` : `contact impedance ${g.contactImpedance} ohm m^2`;
  const outline = g.body.kind === 'disc' ? `Disc of radius ${g.body.radius} m` : `Smooth outline of mean radius ${g.body.radius} m`;
  return [
    `${outline}; electrodes cover ${percent(g.electrodeCoverage)} % of the boundary,`,
    `${g.electrodeAnglesDeg ? `at the listed angles, electrode 1 at ${g.electrodeAnglesDeg[0]} degrees` : `electrode 1 at ${g.firstElectrodeDeg} degrees`}, ${g.numbering}; ${z};`,
    `currents of ${g.current} A per metre of height.`,
  ];
}

function rays({ geometry: g }: DefinitionOf<'x-ray'>): string[] {
  return [
    `Disc of radius ${g.body.radius} m; ${g.views} views from ${g.firstAngleDeg} degrees over ${g.arcDeg} degrees; ${g.detectors} detector cells of ${g.detectorSpacing} m;`,
    g.beam === 'parallel' ? 'parallel rays.' : `a fan from a source ${g.sourceDistance} m before the centre to a flat detector ${g.detectorDistance} m beyond it.`,
  ];
}

function equation({ geometry: g }: DefinitionOf<'integral-equation'>): string[] {
  const { name, line, from, to, dataFrom, dataTo } = equationOf(g);
  return [`${name}: ${line}. ${g.points} values of the right-hand side for s from ${dataFrom} to ${dataTo};`, `${g.cells} unknowns for t from ${from} to ${to}.`];
}

function picture({ geometry: g }: DefinitionOf<'deblurring'>): string[] {
  const spread = { gaussian: `Gaussian of standard deviation ${g.spread} m`, disc: `disc of radius ${g.spread} m`, motion: `motion of half length ${g.spread} m at ${g.motionDeg ?? 0} degrees` }[g.pointSpread];
  return [`Picture of ${g.body.width} by ${g.body.height} m, ${g.cells} pixels along the longer side; point-spread function: ${spread}.`];
}

/** The acquisition in sentences, for texts that go with downloads. */
export function geometryWords(definition: PhantomDefinition): string[] {
  switch (definition.family) {
    case 'electrical-impedance':
      return electrodes(definition);
    case 'x-ray':
      return rays(definition);
    case 'integral-equation':
      return equation(definition);
    case 'deblurring':
      return picture(definition);
  }
}
