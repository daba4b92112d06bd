import { symmetricEigen } from '../../linear-algebra/symmetric-eigen';

/** One sign of a relative map: a matrix with eigenvalues `values` >= 0 for the unit vectors in the rows of `vectors`. */
export interface MapPart {
  readonly size: number;
  readonly values: Float64Array;
  readonly vectors: Float64Array;
  /** What every eigenvalue may be off by. */
  readonly floor: number;
}

export interface SignedParts {
  /** Of -dR: what more conductivity does. Null where no eigenvalue stands out of the floor. */
  readonly more: MapPart | null;
  /** Of dR: what less conductivity does. */
  readonly less: MapPart | null;
}

/**
 * Parts of a relative map by the sign of its eigenvalues; those within the floor count as none. A change of one sign has one part; where
 * there are both the two parts are not those of the two changes, and what is concluded from each of them alone has no guarantee.
 * @param relative symmetric, size x size
 * @param floorOf what every eigenvalue of a map of a spectral norm may be off by (`ElectrodeData.uncertainty`)
 */
export function signedParts(relative: Float64Array, size: number, floorOf: (norm: number) => number): SignedParts {
  const { values, vectors } = symmetricEigen(relative, size);
  const floor = floorOf(Math.max(Math.abs(values[0]), Math.abs(values[size - 1])));
  const part = (sign: 1 | -1): MapPart | null => {
    const kept = values.map((value) => (sign * value > floor ? sign * value : 0));
    return kept.some((value) => value > 0) ? { size, values: kept, vectors, floor } : null;
  };
  return { more: part(-1), less: part(1) };
}
