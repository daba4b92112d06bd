import { describe, expect, it } from 'vitest';
import { createEvaluationGrid, evaluationGrid } from '../../../solvers/core/grid';
import { applySparse } from '../../../solvers/core/sparse';
import { evaluationSide, pixelGrid } from '../../../solvers/problems/pixel-grid/pixel-grid';
import { pixelShares, projectOnPixels } from '../../../solvers/problems/pixel-grid/pixel-image';
import { pixelJumps, pixelPenalty } from '../../../solvers/problems/pixel-grid/pixel-penalty';
import { createTruthField } from '../../../solvers/truth/truth-field';

const disc = (cells: number, radius = 1) => pixelGrid({ nx: cells, ny: cells, xMin: -radius, xMax: radius, yMin: -radius, yMax: radius, body: { kind: 'disc', radius } });

describe('Cells over a body', () => {
  it('touch the disc, and no cell that touches it is left out', () => {
    for (const cells of [8, 9, 40, 41]) {
      const grid = disc(cells);
      for (let cell = 0; cell < cells * cells; cell++) {
        const x0 = -1 + (cell % cells) * grid.dx;
        const y0 = -1 + Math.floor(cell / cells) * grid.dy;
        const x = Math.max(x0, Math.min(x0 + grid.dx, 0));
        const y = Math.max(y0, Math.min(y0 + grid.dy, 0));
        // Within rounding of the circle either answer is right.
        const distance = Math.sqrt(x * x + y * y);
        if (Math.abs(distance - 1) > 1e-12) expect(grid.numberOf[cell] >= 0).toBe(distance < 1);
      }
      expect(Array.from(grid.inside, (cell) => grid.numberOf[cell])).toEqual(Array.from(grid.inside.keys()));
    }
  });

  it('have the same cells for every size of the body', () => {
    expect(disc(40, 0.1).inside).toEqual(disc(40, 1).inside);
    expect(disc(40, 7).inside).toEqual(disc(40, 1).inside);
  });

  it('fill a rectangle and an interval', () => {
    const rectangle = pixelGrid({ nx: 12, ny: 8, xMin: -3, xMax: 3, yMin: -2, yMax: 2, body: { kind: 'rectangle', width: 6, height: 4 } });
    expect(rectangle.inside.length).toBe(96);
    const line = pixelGrid({ nx: 10, ny: 1, xMin: 2, xMax: 3, yMin: 0, yMax: 1, body: { kind: 'interval', from: 2, to: 3 } });
    expect(line.inside.length).toBe(10);
    expect(line.weights[0]).toBeCloseTo(0.1, 15);
  });

  it('refuse an empty extent and a count that is no whole number', () => {
    expect(() => pixelGrid({ nx: 4, ny: 4, xMin: 1, xMax: 1, yMin: 0, yMax: 1, body: { kind: 'disc', radius: 1 } })).toThrow(RangeError);
    expect(() => disc(4.5)).toThrow(RangeError);
  });
});

describe('Penalties on cells (finite-volume formulas, common practice)', () => {
  const grid = pixelGrid({ nx: 30, ny: 20, xMin: 0, xMax: 3, yMin: 0, yMax: 2, body: { kind: 'rectangle', width: 3, height: 2 } });
  const square = (kind: 'identity' | 'gradient' | 'laplacian', f: (x: number, y: number) => number): number => {
    const matrix = pixelPenalty(grid, kind);
    const x = Float64Array.from(grid.inside, (cell) => f(((cell % 30) + 0.5) * 0.1, (Math.floor(cell / 30) + 0.5) * 0.1));
    const out = new Float64Array(matrix.rows);
    applySparse(matrix, x, out);
    return out.reduce((sum, v) => sum + v * v, 0);
  };

  it('approximate the integrals of x^2, |grad x|^2 and (Laplacian x)^2', () => {
    expect(square('identity', () => 3)).toBeCloseTo(9 * 6, 10);
    // x + 2 y over the 29 x 20 and 30 x 19 interfaces of cells.
    expect(square('gradient', (x, y) => x + 2 * y)).toBeCloseTo(29 * 20 * 0.01 + 4 * 30 * 19 * 0.01, 10);
    // cos(pi x) cos(pi y) has no flux through the sides: the eigenvalue of the five-point formula is 2 (2 - 2 cos(pi h)) / h^2.
    const eigenvalue = (2 * (2 - 2 * Math.cos(Math.PI * 0.1))) / 0.01;
    expect(square('laplacian', (x, y) => Math.cos(Math.PI * x) * Math.cos(Math.PI * y)) / (eigenvalue ** 2 * 6 * 0.25)).toBeCloseTo(1, 10);
  });

  it('give the perimeter of a block as its total variation', () => {
    const { matrix, lengths } = pixelJumps(grid);
    const x = Float64Array.from(grid.inside, (cell) => (cell % 30 >= 5 && cell % 30 < 12 && cell >= 30 * 4 && cell < 30 * 9 ? 2 : 0));
    const out = new Float64Array(matrix.rows);
    applySparse(matrix, x, out);
    expect(out.reduce((sum, v, i) => sum + lengths[i] * Math.abs(v), 0)).toBeCloseTo(2 * 2 * (0.7 + 0.5), 10);
  });
});

describe('From cells to the evaluation grid', () => {
  it('averages by area: rows sum to 1, whatever the two grids', () => {
    for (const cells of [8, 40, 41, 64, 100]) {
      const shares = pixelShares(disc(cells), createEvaluationGrid(1, evaluationSide(cells)));
      const ones = new Float64Array(shares.rows);
      applySparse(shares, new Float64Array(shares.cols).fill(1), ones);
      for (const value of ones) expect(Math.abs(value - 1)).toBeLessThan(1e-12);
    }
  });

  it('copies where the two grids are one, and keeps the mean where they nest', () => {
    const extent = { xMin: 0, xMax: 1, yMin: 0, yMax: 2, body: { kind: 'rectangle' as const, width: 1, height: 2 } };
    const cells = pixelGrid({ nx: 4, ny: 4, ...extent });
    const x = Float64Array.from({ length: 16 }, (_, i) => i * i);
    const same = new Float64Array(16);
    applySparse(pixelShares(cells, evaluationGrid({ nx: 4, ny: 4, ...extent })), x, same);
    expect(Array.from(same)).toEqual(Array.from(x));
    const three = new Float64Array(9);
    applySparse(pixelShares(cells, evaluationGrid({ nx: 3, ny: 3, ...extent })), x, three);
    expect(three.reduce((sum, v) => sum + v, 0) / 9).toBeCloseTo(x.reduce((sum, v) => sum + v, 0) / 16, 12);
  });
});

describe('Ground truths on cells', () => {
  it('average over each cell, clipped to the body', () => {
    const truth = createTruthField({ kind: 'expression', background: 1, expression: '2 + x' });
    const grid = pixelGrid({ nx: 10, ny: 10, xMin: -1, xMax: 1, yMin: -1, yMax: 1, body: { kind: 'rectangle', width: 2, height: 2 } });
    projectOnPixels(truth, grid).forEach((value, i) => expect(value).toBeCloseTo(2 + ((i % 10) + 0.5) * 0.2 - 1, 12));
    const field = createTruthField({ kind: 'shapes', background: 1, shapes: [{ kind: 'ellipse', label: 'disc', target: true, value: 3, x: 0.1, y: 0, semiAxisA: 0.5, semiAxisB: 0.5, angleDeg: 0 }] });
    const cells = disc(41);
    const mass = projectOnPixels(field, cells).reduce((sum, v) => sum + (v - 1) * cells.dx * cells.dy, 0);
    // Midpoint rule with 16 x 16 samples a cell: the area of the disc within 1e-3.
    expect(mass / (2 * Math.PI * 0.25)).toBeCloseTo(1, 3);
  });
});
