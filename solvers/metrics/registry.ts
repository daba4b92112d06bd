import { findByKey } from '../core/registry';
import type { MetricInput, MetricValue } from '../core/types';
import { amplitudeResponse } from './amplitude-response';
import { correlationScore } from './correlation-score';
import { credibleCoverage } from './credible-coverage';
import { dataResidualRatio } from './data-residual-ratio';
import { diceScore } from './dice-score';
import { falseTargetsError } from './false-targets-error';
import { summarise, type MetricDefinition } from './metric-definition';
import { missedTargetsError } from './missed-targets-error';
import { fullWidthHalfMaximum } from './full-width-half-maximum';
import { peakPositionError } from './peak-position-error';
import { positionError } from './position-error';
import { psnrScore } from './psnr-score';
import { radialPositionDifference } from './radial-position-difference';
import { relativeH1Error } from './relative-h1-error';
import { relativeL1Error } from './relative-l1-error';
import { relativeL2Error } from './relative-l2-error';
import { relativeSupError } from './relative-sup-error';
import { resolution } from './resolution';
import { ringing } from './ringing';
import { shapeDeformation } from './shape-deformation';
import { ssimScore } from './ssim-score';
import { supError } from './sup-error';

export const metrics: readonly MetricDefinition[] = [
  relativeL2Error, supError, relativeSupError, relativeL1Error, positionError, radialPositionDifference, resolution, amplitudeResponse, dataResidualRatio,
  relativeH1Error, ssimScore, psnrScore, correlationScore, shapeDeformation, ringing,
  peakPositionError, fullWidthHalfMaximum,
  diceScore, missedTargetsError, falseTargetsError, credibleCoverage,
];

/** @throws RangeError for an unknown key. */
export const getMetric = (key: string): MetricDefinition => findByKey(metrics, key, 'metric');

/**
 * Every registered metric of one image, by key.
 * Cost: one pass over the pixels, and one or two more where targets are declared.
 * @throws RangeError where the images have different lengths or are not finite
 */
export function evaluateMetrics(input: MetricInput): Record<string, MetricValue> {
  const summary = summarise(input);
  const values: Record<string, MetricValue> = {};
  for (const metric of metrics) values[metric.key] = metric.fromSummary(summary);
  return values;
}
