import { familyNames, type FamilyKey } from '../../../shared/domain/families';
import type { Metric } from '../../../solvers/core/types';

/** Unit of a metric in a family: the largest error is in the unit of what is reconstructed. */
export const metricUnit = ({ key, unit }: Pick<Metric, 'key' | 'unit'>, family: FamilyKey): string => (key === 'sup-error' ? familyNames[family].valueUnit : unit);
