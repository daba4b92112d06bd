import { arrowRoots } from './secular-equation';
import type { VectorMachine } from './vector-machine';

const epsilon = 2.220446049250313e-16;

/** Where the singular vectors of a bidiagonal matrix of n rows are made, all row-major. */
export interface BidiagonalPlaces {
  /** n x n: left singular vectors as rows. */
  readonly left: number;
  /** (n + 1) x (n + 1): right singular vectors as rows; the last row and column belong to the column that is added. */
  readonly right: number;
  /** 4 (n + 1)^2 */
  readonly scratch: number;
}

/**
 * Singular values and vectors of an upper bidiagonal matrix by divide and conquer (Gu and Eisenstat 1995, SIAM J. Matrix Anal.
 * Appl. 16, 79-92): two halves, joined by an arrow matrix. Every part is seen with one column more than rows.
 * @param upper length n; the last entry couples to the column that is added, zero for a square matrix
 * @returns singular values in the order of the rows of `left` and `right`, not sorted
 */
export function bidiagonalSvd(machine: VectorMachine, diagonal: Float64Array, upper: Float64Array, places: BidiagonalPlaces): Float64Array {
  const n = diagonal.length;
  const { values } = machine;
  values.fill(0, places.left, places.left + n * n);
  values.fill(0, places.right, places.right + (n + 1) * (n + 1));
  const s = new Float64Array(n);
  new Conquest(machine, diagonal, upper, places, s).solve(0, n);
  return s;
}

class Conquest {
  private readonly n: number;

  constructor(
    private readonly machine: VectorMachine, private readonly diagonal: Float64Array, private readonly upper: Float64Array,
    private readonly places: BidiagonalPlaces, private readonly s: Float64Array,
  ) {
    this.n = diagonal.length;
  }

  private leftAt(i: number, j: number): number {
    return this.places.left + i * this.n + j;
  }

  private rightAt(i: number, j: number): number {
    return this.places.right + i * (this.n + 1) + j;
  }

  /** Rows lo .. hi of the matrix, columns lo .. hi (one more): the last right vector spans the null space. */
  solve(lo: number, hi: number): void {
    const { values } = this.machine;
    if (lo === hi) {
      values[this.rightAt(lo, lo)] = 1;
      return;
    }
    if (hi - lo === 1) {
      const a = this.diagonal[lo];
      const b = this.upper[lo];
      const norm = Math.sqrt(a * a + b * b);
      this.s[lo] = norm;
      values[this.leftAt(lo, lo)] = 1;
      const c = norm > 0 ? a / norm : 1;
      const t = norm > 0 ? b / norm : 0;
      values[this.rightAt(lo, lo)] = c;
      values[this.rightAt(lo, hi)] = t;
      values[this.rightAt(hi, lo)] = -t;
      values[this.rightAt(hi, hi)] = c;
      return;
    }
    const middle = (lo + hi) >> 1;
    this.solve(lo, middle);
    this.solve(middle + 1, hi);
    this.join(lo, middle, hi);
  }

  /** The row between the halves in the basis of their right vectors is the arrow's first row. */
  private join(lo: number, middle: number, hi: number): void {
    const { values } = this.machine;
    const { s } = this;
    const alpha = this.diagonal[middle];
    const beta = this.upper[middle];
    // Null vectors of the halves: rows `middle` (columns lo .. middle) and `hi` (columns middle + 1 .. hi) of `right`.
    const first = alpha * values[this.rightAt(middle, middle)];
    const second = beta * values[this.rightAt(hi, middle + 1)];
    const norm = Math.sqrt(first * first + second * second);
    const c = norm > 0 ? first / norm : 1;
    const t = norm > 0 ? second / norm : 0;
    for (let j = lo; j <= middle; j++) {
      const v = values[this.rightAt(middle, j)];
      values[this.rightAt(middle, j)] = c * v;
      values[this.rightAt(hi, j)] = -t * v;
    }
    for (let j = middle + 1; j <= hi; j++) {
      const v = values[this.rightAt(hi, j)];
      values[this.rightAt(middle, j)] = t * v;
      values[this.rightAt(hi, j)] = c * v;
    }
    values[this.leftAt(middle, middle)] = 1;
    // Entry 0 is the middle row, the others ascend.
    const rows: number[] = [];
    for (let i = lo; i < hi; i++) if (i !== middle) rows.push(i);
    rows.sort((a, b) => s[a] - s[b] || a - b);
    let scale = Math.max(Math.abs(alpha), Math.abs(beta));
    for (const i of rows) scale = Math.max(scale, s[i]);
    const tolerance = 8 * epsilon * scale;
    const kept: number[] = [middle];
    const z: number[] = [Math.max(norm, tolerance)];
    // Rows that reach into both halves, because two equal values were turned into each other.
    const mixed = new Set<number>([middle]);
    for (const i of rows) {
      let weight = i < middle ? alpha * values[this.rightAt(i, middle)] : beta * values[this.rightAt(i, middle + 1)];
      if (Math.abs(weight) <= tolerance) continue;
      const before = kept[kept.length - 1];
      if (kept.length > 1 && s[i] - s[before] <= tolerance) {
        const other = z[z.length - 1];
        const radius = Math.sqrt(weight * weight + other * other);
        this.rotate(before, i, weight / radius, other / radius, lo, hi);
        if (before < middle !== i < middle || mixed.has(before) || mixed.has(i)) {
          mixed.add(before);
          mixed.add(i);
        }
        weight = radius;
        kept[kept.length - 1] = i;
        z[z.length - 1] = weight;
      } else {
        kept.push(i);
        z.push(weight);
      }
    }
    if (scale > 0) this.combine(lo, middle, hi, kept, Float64Array.from(z), mixed, tolerance);
  }

  /** Rows i and j of the vectors become c i - t j and t i + c j. */
  private rotate(i: number, j: number, c: number, t: number, lo: number, hi: number): void {
    const { values } = this.machine;
    for (const [a, b, count] of [[this.leftAt(i, lo), this.leftAt(j, lo), hi - lo], [this.rightAt(i, lo), this.rightAt(j, lo), hi - lo + 1]])
      for (let k = 0; k < count; k++) {
        const p = values[a + k];
        const q = values[b + k];
        values[a + k] = c * p - t * q;
        values[b + k] = t * p + c * q;
      }
  }

  /** Solves the arrow matrix of the rows kept and turns their vectors. */
  private combine(lo: number, middle: number, hi: number, kept: readonly number[], z: Float64Array, mixed: ReadonlySet<number>, tolerance: number): void {
    const { machine, s } = this;
    const { values } = machine;
    const count = kept.length;
    const d = new Float64Array(count);
    for (let j = 1; j < count; j++) d[j] = s[kept[j]];
    if (count > 1 && d[1] < 0.5 * tolerance) d[1] = 0.5 * tolerance;
    const roots = arrowRoots(d, z, count);
    const { gaps } = roots;
    // Weights for which the computed values are exact: the vectors come out orthogonal.
    const exact = new Float64Array(count);
    for (let j = 0; j < count; j++) {
      let product = -gaps[(count - 1) * count + j];
      for (let i = 0; i < j; i++) product *= gaps[i * count + j] / ((d[j] - d[i]) * (d[j] + d[i]));
      for (let i = j; i < count - 1; i++) product *= gaps[i * count + j] / ((d[j] - d[i + 1]) * (d[j] + d[i + 1]));
      const weight = Math.sqrt(Math.abs(product));
      exact[j] = z[j] < 0 ? -weight : weight;
    }
    const leftTurn = this.places.scratch;
    const rightTurn = leftTurn + count * count;
    for (let i = 0; i < count; i++) {
      let leftSquare = 1;
      let rightSquare = 0;
      for (let j = 0; j < count; j++) {
        const v = exact[j] / gaps[i * count + j];
        values[rightTurn + i * count + j] = v;
        rightSquare += v * v;
        const u = j === 0 ? -1 : d[j] * v;
        values[leftTurn + i * count + j] = u;
        if (j > 0) leftSquare += u * u;
      }
      const leftScale = 1 / Math.sqrt(leftSquare);
      const rightScale = 1 / Math.sqrt(rightSquare);
      for (let j = 0; j < count; j++) {
        values[leftTurn + i * count + j] *= leftScale;
        values[rightTurn + i * count + j] *= rightScale;
      }
    }
    const spare = rightTurn + count * count;
    const top = kept.flatMap((i, j) => (i <= middle || mixed.has(i) ? [j] : []));
    const bottom = kept.flatMap((i, j) => (i > middle || mixed.has(i) ? [j] : []));
    // The middle row has a left vector of its own and a right vector in both halves.
    this.turn(leftTurn, count, top, kept, (i, j) => this.leftAt(i, j), lo, middle + 1, spare);
    this.turn(leftTurn, count, bottom.filter((j) => kept[j] !== middle), kept, (i, j) => this.leftAt(i, j), middle + 1, hi, spare);
    this.turn(rightTurn, count, top, kept, (i, j) => this.rightAt(i, j), lo, middle + 1, spare);
    this.turn(rightTurn, count, bottom, kept, (i, j) => this.rightAt(i, j), middle + 1, hi + 1, spare);
    for (let j = 0; j < count; j++) s[kept[j]] = roots.values[j];
  }

  /** Columns from .. to of the kept rows = turn x (those rows that are not zero there). */
  private turn(
    turn: number, count: number, present: readonly number[], kept: readonly number[], at: (i: number, j: number) => number, from: number, to: number, spare: number,
  ): void {
    const { values } = this.machine;
    const wide = to - from;
    const inner = present.length;
    const packedTurn = spare;
    const packedRows = packedTurn + count * inner;
    const result = packedRows + inner * wide;
    for (let i = 0; i < count; i++) for (let k = 0; k < inner; k++) values[packedTurn + i * inner + k] = values[turn + i * count + present[k]];
    for (let k = 0; k < inner; k++) values.copyWithin(packedRows + k * wide, at(kept[present[k]], from), at(kept[present[k]], from) + wide);
    this.machine.multiply(packedTurn, inner, 1, packedRows, wide, 1, result, wide, count, inner, wide, false);
    for (let i = 0; i < count; i++) values.copyWithin(at(kept[i], from), result + i * wide, result + (i + 1) * wide);
  }
}
