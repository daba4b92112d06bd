import type { AxisSetting } from '../../../shared/domain/axes';
import type { Run } from '../../entities/run.ts';

/** What the levels of a run vary: runs from before there were other axes have none written down, and vary the noise. */
export const axisOf = (run: Pick<Run, 'axis'>): AxisSetting => run.axis ?? { key: 'noise' };
