import { scratchWith, type Resident } from '../kernels/kernel-memory';
import { multiplyRows, transposeSparse } from './sparse-rows';
import type { SparseMatrix } from './types';

const smallest = 100_000;
/** With its transpose 290 MB. */
const largest = 12_000_000;
/** Adjoint products before the transpose is made. */
const usesBefore = 3;

export const isLarge = ({ values }: SparseMatrix): boolean => values.length >= smallest && values.length <= largest;

const known = new WeakMap<SparseMatrix, LargeProduct>();

/** Products of one large matrix, which is kept from the first one on. */
export function largeProduct(a: SparseMatrix): LargeProduct {
  let product = known.get(a);
  if (!product) known.set(a, (product = new LargeProduct(a)));
  return product;
}

const bytesOf = ({ rows, values }: SparseMatrix): number => 4 * (rows + 2) + 12 * (values.length + 2);

/** A matrix, later with its transpose, in the memory of the compiled kernels; the arrays outside stay as they are. */
class Home implements Resident {
  readonly bytes: number;
  private readonly starts: number[] = [];
  constructor(private readonly matrices: readonly SparseMatrix[]) {
    let used = 0;
    for (const matrix of matrices) {
      this.starts.push(used);
      used += (bytesOf(matrix) + 7) & ~7;
    }
    this.bytes = used;
  }

  leave(): void {
    // Nothing in the memory is the only copy.
  }

  /** The product with matrix `which`; false where the kernels refuse. */
  apply(which: number, x: Float64Array, out: Float64Array): boolean {
    const room = scratchWith(this, 8 * x.length, 8 * out.length);
    if (!room) return false;
    const addresses = this.matrices.map((matrix, index) => {
      const values = room.address + this.starts[index];
      const columns = values + 8 * matrix.values.length;
      const rowStart = columns + 4 * matrix.columns.length;
      if (room.fresh) {
        new Float64Array(room.buffer, values, matrix.values.length).set(matrix.values);
        new Int32Array(room.buffer, columns, matrix.columns.length).set(matrix.columns);
        new Int32Array(room.buffer, rowStart, matrix.rowStart.length).set(matrix.rowStart);
      }
      return { values, columns, rowStart };
    });
    const [atX, atOut] = room.addresses;
    new Float64Array(room.buffer, atX, x.length).set(x);
    const { rowStart, columns, values } = addresses[which];
    room.kernels.sparseRows(this.matrices[which].rows, rowStart, columns, values, atX, atOut);
    out.set(new Float64Array(room.buffer, atOut, out.length));
    return true;
  }
}

/**
 * Products that come again and again. After a few adjoint products the transpose is kept beside the matrix: it adds the same products
 * in the same order, reading in a row what the other way writes here and there.
 */
export class LargeProduct {
  private home: Home;
  private transposed: SparseMatrix | null = null;
  private adjointUses = 0;

  constructor(private readonly matrix: SparseMatrix) {
    this.home = new Home([matrix]);
  }

  apply(x: Float64Array, out: Float64Array): void {
    if (!this.home.apply(0, x, out)) multiplyRows(this.matrix, x, out);
  }

  /** False while there is no transpose. */
  applyTransposed(y: Float64Array, out: Float64Array): boolean {
    if (!this.transposed) {
      if (++this.adjointUses <= usesBefore) return false;
      this.transposed = transposeSparse(this.matrix);
      this.home = new Home([this.matrix, this.transposed]);
    }
    if (!this.home.apply(1, y, out)) multiplyRows(this.transposed, y, out);
    return true;
  }
}
