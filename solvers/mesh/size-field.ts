/** A place that asks for small elements: size `size` there, growing with `slope` times the distance. */
export interface SizeSource {
  readonly x: number;
  readonly y: number;
  readonly size: number;
}

export interface SizeFieldSpec {
  /** Grading centres (x, y pairs): size at most `grading` times the distance to the nearest, never below `minimum`. */
  readonly centres: Float64Array;
  readonly grading: number;
  readonly minimum: number;
  readonly maximum: number;
  /**
   * Nearer than `relief` to a centre the grading grows as (relief / distance)^(1/4), up to `tipGrading`: the energy of a
   * square-root singularity in a ring falls with its radius, so that small rings need fewer elements for their share of the
   * error. Balancing (energy x h^4) against the number of elements gives the exponent 1/6; 1/4 costs fewer elements at the
   * same error (measured on the reference voltages).
   */
  readonly relief?: number;
  readonly tipGrading?: number;
  /** Further places that ask for small elements; the size grows with slope `sourceSlope` away from them. */
  readonly sources?: readonly SizeSource[];
  readonly sourceSlope?: number;
  /**
   * Corners of interfaces (x, y pairs) and their own grading: size at most `cornerGrading` times the distance, never below
   * `cornerMinimum`.
   */
  readonly corners?: Float64Array;
  readonly cornerGrading?: number;
  readonly cornerMinimum?: number;
  /** Half the side of the background grid, a square about the origin that holds the body. */
  readonly reach?: number;
}

const gridSide = 160;

/**
 * Wanted edge length in the body. Sources are extended over a background grid by sweeps of
 * s_i = min(s_i, s_j + slope |x_i - x_j|) over the eight neighbours (a discrete Lipschitz extension), then read bilinearly;
 * grading centres and corners are too fine for the grid and are evaluated as they are.
 */
export class SizeField {
  private readonly centres: Float64Array;
  private readonly corners: Float64Array;
  private readonly grid: Float64Array | null;
  private readonly reach: number;
  private readonly cell: number;
  private readonly relief: number;
  private readonly tipGrading: number;
  private readonly cornerGrading: number;
  private readonly cornerMinimum: number;

  constructor(private readonly spec: SizeFieldSpec) {
    this.centres = spec.centres;
    this.reach = spec.reach ?? 1.1;
    this.cell = (2 * this.reach) / (gridSide - 1);
    this.relief = spec.relief ?? 0;
    this.tipGrading = spec.tipGrading ?? spec.grading;
    this.corners = spec.corners ?? new Float64Array(0);
    this.cornerGrading = spec.cornerGrading ?? spec.grading;
    this.cornerMinimum = spec.cornerMinimum ?? spec.minimum;
    this.grid = spec.sources && spec.sources.length > 0 ? this.extend(spec.sources, spec.sourceSlope ?? 0.3) : null;
  }

  get minimum(): number {
    return this.spec.minimum;
  }

  get maximum(): number {
    return this.spec.maximum;
  }

  at(x: number, y: number): number {
    const { centres, corners, spec } = this;
    let nearest = Infinity;
    for (let i = 0; i < centres.length; i += 2) {
      const dx = x - centres[i];
      const dy = y - centres[i + 1];
      const d = dx * dx + dy * dy;
      if (d < nearest) nearest = d;
    }
    const d = Math.sqrt(nearest);
    let share = spec.grading;
    if (this.relief > d && d > 0) share = Math.min(this.tipGrading, share * Math.sqrt(Math.sqrt(this.relief / d)));
    let size = Math.min(spec.maximum, Math.max(spec.minimum, share * d));
    if (corners.length > 0) {
      let corner = Infinity;
      for (let i = 0; i < corners.length; i += 2) {
        const dx = x - corners[i];
        const dy = y - corners[i + 1];
        const d = dx * dx + dy * dy;
        if (d < corner) corner = d;
      }
      size = Math.min(size, Math.max(this.cornerMinimum, this.cornerGrading * Math.sqrt(corner)));
    }
    if (this.grid) size = Math.min(size, this.interpolate(x, y));
    return size;
  }

  private interpolate(x: number, y: number): number {
    const grid = this.grid!;
    const u = Math.min(gridSide - 1.001, Math.max(0, (x + this.reach) / this.cell));
    const v = Math.min(gridSide - 1.001, Math.max(0, (y + this.reach) / this.cell));
    const i = Math.floor(u);
    const j = Math.floor(v);
    const a = u - i;
    const b = v - j;
    const k = j * gridSide + i;
    return (1 - b) * ((1 - a) * grid[k] + a * grid[k + 1]) + b * ((1 - a) * grid[k + gridSide] + a * grid[k + gridSide + 1]);
  }

  private extend(sources: readonly SizeSource[], slope: number): Float64Array {
    const n = gridSide;
    const grid = new Float64Array(n * n).fill(this.spec.maximum);
    for (const s of sources) {
      const i0 = Math.floor((s.x + this.reach) / this.cell);
      const j0 = Math.floor((s.y + this.reach) / this.cell);
      for (let j = j0; j <= j0 + 1; j++) {
        for (let i = i0; i <= i0 + 1; i++) {
          if (i < 0 || j < 0 || i >= n || j >= n) continue;
          const dx = i * this.cell - this.reach - s.x;
          const dy = j * this.cell - this.reach - s.y;
          // The corners of the source's own cell take its size with the slope only beyond half a cell, so that the
          // interpolated value at the source is close to what it asked for.
          const size = s.size + slope * Math.max(0, Math.sqrt(dx * dx + dy * dy) - this.cell);
          const k = j * n + i;
          if (size < grid[k]) grid[k] = size;
        }
      }
    }
    const straight = slope * this.cell;
    const diagonal = straight * Math.SQRT2;
    for (let sweep = 0; sweep < 2; sweep++) {
      for (let j = 0; j < n; j++) {
        for (let i = 0; i < n; i++) {
          const k = j * n + i;
          let value = grid[k];
          if (i > 0) value = Math.min(value, grid[k - 1] + straight);
          if (j > 0) {
            value = Math.min(value, grid[k - n] + straight);
            if (i > 0) value = Math.min(value, grid[k - n - 1] + diagonal);
            if (i < n - 1) value = Math.min(value, grid[k - n + 1] + diagonal);
          }
          grid[k] = value;
        }
      }
      for (let j = n - 1; j >= 0; j--) {
        for (let i = n - 1; i >= 0; i--) {
          const k = j * n + i;
          let value = grid[k];
          if (i < n - 1) value = Math.min(value, grid[k + 1] + straight);
          if (j < n - 1) {
            value = Math.min(value, grid[k + n] + straight);
            if (i < n - 1) value = Math.min(value, grid[k + n + 1] + diagonal);
            if (i > 0) value = Math.min(value, grid[k + n - 1] + diagonal);
          }
          grid[k] = value;
        }
      }
    }
    return grid;
  }
}
