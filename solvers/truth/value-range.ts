import { limits } from '../../shared/domain/limits';

/** Values that a ground truth may take, and how a refusal says so. */
export interface ValueRange {
  readonly min: number;
  readonly max: number;
  /** Printed after a value: ' S/m'. */
  readonly unit: string;
  /** 'a conductivity must lie between ...'. */
  readonly rule: string;
}

export const conductivityRange: ValueRange = {
  min: limits.conductivityMin, max: limits.conductivityMax, unit: ' S/m', rule: `a conductivity must lie between ${limits.conductivityMin} and ${limits.conductivityMax} S/m`,
};

/** Of either sign: attenuations and their differences, intensities. */
export const plainRange = (unit = ''): ValueRange => ({
  min: -limits.plainValueMax, max: limits.plainValueMax, unit, rule: `a value must lie between ${-limits.plainValueMax} and ${limits.plainValueMax}${unit}`,
});
