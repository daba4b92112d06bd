import { describe, expect, it } from 'vitest';
import reference from '../../../reference/neumann-to-dirichlet.json';
import { ellipse, shapesTruth } from '../../../support/impedance-case';
import type { Shape } from '../../../../shared/domain/truth-definition';
import { neumannToDirichletByBoundaryIntegrals } from '../../../../solvers/problems/electrical-impedance/boundary-integrals/neumann-to-dirichlet';
import type { Harmonic } from '../../../../solvers/problems/electrical-impedance/continuum';

/** Far below the 1e-4 that a simulation may have; the values are right to rounding. */
const bound = 1e-8;

function mapOf(shapes: Shape[], harmonics: readonly Harmonic[]): (i: number, j: number) => number {
  const map = neumannToDirichletByBoundaryIntegrals(shapesTruth(shapes, reference.concentric.outside), 1, harmonics);
  return (i, j) => map[i * harmonics.length + j];
}

describe('Neumann-to-Dirichlet map of the disc by boundary integrals', () => {
  const rows = reference.concentric.values as [number, number, number, number][];

  it.each([...new Set(rows.map(([rho, inside]) => `${rho} ${inside}`))])('has the eigenvalues of Isaacson 1986: rho and conductivity %s', (key) => {
    const [rho, inside] = key.split(' ').map(Number);
    const wanted = rows.filter((r) => r[0] === rho && r[1] === inside);
    const entry = mapOf([ellipse(0, 0, rho, rho, inside)], wanted.map(([, , n]) => ({ n, kind: 'cos' })));
    wanted.forEach(([, , , eigenvalue], i) => expect(Math.abs(entry(i, i) / eigenvalue - 1)).toBeLessThan(bound));
  });

  it('has them for three layers', () => {
    const { radii, conductivityInsideOut, n, values } = reference.layers;
    const entry = mapOf([ellipse(0, 0, radii[1], radii[1], conductivityInsideOut[1]), ellipse(0, 0, radii[0], radii[0], conductivityInsideOut[0])], n.map((k) => ({ n: k, kind: 'cos' })));
    values.forEach((eigenvalue, i) => expect(Math.abs(entry(i, i) / eigenvalue - 1)).toBeLessThan(bound));
  });

  it('has the whole matrix for an eccentric disc', () => {
    const { centre, radius, inside, matrix } = reference.eccentric;
    const harmonics: Harmonic[] = (['cos', 'sin'] as const).flatMap((kind) => [1, 2, 3, 4].map((n) => ({ n, kind })));
    const entry = mapOf([ellipse(centre[0], centre[1], radius, radius, inside)], harmonics);
    for (let i = 0; i < 8; i++) for (let j = 0; j < 8; j++) expect(Math.abs(entry(i, j) - matrix[i][j])).toBeLessThan(bound);
  });
});
