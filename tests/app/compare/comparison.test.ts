import { describe, expect, it } from 'vitest';
import type { TrialWire } from '../../../shared/contracts/runs';
import { disagreement, drawsWon, middleDraw, pairs, ratios, sharedDraws, spokenVerdict, type Contender } from '../../../app/features/compare/model/comparison';

const trial = (draw: number, l2: number | null, sup: number): TrialWire => ({
  level: 5, draw, noiseNorm: 1, parameter: null, iterations: 1, forwardSolves: 0, stop: 'converged', metrics: { 'relative-l2-error': l2, 'sup-error': sup }, supAt: null, seconds: null, imageHash: '0'.repeat(64), imageStored: false,
});
const contender = (letter: string, l2: (number | null)[], sup: number): Contender => ({ id: letter, letter, glyph: 0, name: `Method ${letter}`, short: `M${letter}`, trials: l2.map((v, d) => trial(d, v, sup)) });
const twelve = Array.from({ length: 12 }, (_, i) => 0.1 + i * 0.001);

describe('comparison of runs', () => {
  const a = contender('A', twelve, 0.3);
  const b = contender('B', twelve.map((v) => v * 1.5), 0.3);
  const c = contender('C', twelve.map((v, i) => v + (i % 2 ? 0.0005 : -0.0005)), 0.9);

  it('pairs only the draws that all have', () => {
    const short: Contender = { ...b, trials: b.trials.slice(2) };
    expect(sharedDraws([a, short])).toEqual([2, 3, 4, 5, 6, 7, 8, 9, 10, 11]);
  });

  it('separates a method that wins every draw, and not one that wins half by nothing', () => {
    const found = pairs([a, b, c], 'relative-l2-error');
    const of = (x: string, y: string) => found.find((p) => p.first === x && p.second === y)!;
    // Twelve wins of twelve: two-sided p of the signed ranks is 2 / 2^12 (Wilcoxon 1945), below 0.05 after Holm times 3.
    expect(of('A', 'B')).toMatchObject({ separable: true, wins: 1 });
    expect(of('A', 'B').pValue).toBeCloseTo(2 / 4096, 12);
    expect(of('A', 'C').separable).toBe(false);
    expect(drawsWon(of('A', 'C'))).toBe('6');
  });

  it('gives the ratios of paired errors', () => {
    const r = ratios(a, b, 'relative-l2-error')!;
    expect(r.sorted).toHaveLength(12);
    expect(r.middle).toBeCloseTo(1 / 1.5, 12); // rounding
  });

  it('speaks counts before adjectives, and of both norms', () => {
    const words = spokenVerdict([a, b, c], 0.01, 5e-4, 'S/m').join(' ');
    expect(words).toContain('cannot be separated in relative L2');
    expect(words).toContain('In L∞ Method C stands apart: its median largest error is 0.900 S/m, 3.0 times that of');
    expect(spokenVerdict([a, b], 1e-4, 5e-4, 'S/m').join(' ')).toContain('below the model-error floor');
  });

  it('finds the pair that the norms judge most differently', () => {
    const found = disagreement([{ contender: a, l2: 0.15, sup: 0.3 }, { contender: b, l2: 0.3, sup: 0.33 }, { contender: c, l2: 0.16, sup: 0.9 }]);
    expect([found?.near.letter, found?.far.letter]).toEqual(['B', 'C']);
  });

  it('shows the draw in the middle, leaving undefined ones out', () => {
    expect(middleDraw(contender('D', [0.5, null, 0.1, 0.3], 1))).toBe(3);
    expect(middleDraw(undefined)).toBeNull();
  });
});
