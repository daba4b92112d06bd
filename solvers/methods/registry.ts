import { findByKey } from '../core/registry';
import type { Method } from '../core/types';
import { backProjectionMethod } from './back-projection';
import { boxConstrainedTikhonovMethod } from './box-constrained-tikhonov';
import { calderonMethod } from './calderon';
import { cglsMethod } from './cgls';
import { crankNicolsonMethod } from './crank-nicolson';
import { dBarMethod } from './d-bar';
import { ensembleKalmanMethod } from './ensemble-kalman';
import { exponentialFilterMethod } from './exponential-filter';
import { factorisationMethod } from './factorisation';
import { filterExpressionMethod } from './filter-expression';
import { filteredBackProjectionMethod } from './filtered-back-projection';
import { gaussNewtonMethod } from './gauss-newton';
import { gaussNewtonTotalVariationMethod } from './gauss-newton-total-variation';
import { iteratedTikhonovMethod } from './iterated-tikhonov';
import { kaczmarzMethod } from './kaczmarz';
import { laggedDiffusivityMethod } from './lagged-diffusivity';
import { landweberMethod } from './landweber';
import { levenbergMarquardtMethod } from './levenberg-marquardt';
import { lsqrMethod } from './lsqr';
import { monotonicityMethod } from './monotonicity';
import { nuMethod } from './nu-method';
import { sartMethod } from './sart';
import { sensitivityPriorMethod } from './sensitivity-prior';
import { smoothnessPriorMethod } from './smoothness-prior';
import { sirtMethod } from './sirt';
import { tikhonovMethod } from './tikhonov';
import { totalVariationMethod } from './total-variation';
import { trainedLinearMethod } from './trained-linear';
import { trivialMethod } from './trivial';
import { truncatedSvdMethod } from './truncated-svd';
import { waveletSparsityMethod } from './wavelet-sparsity';

export const methods: readonly Method[] = [
  trivialMethod,
  truncatedSvdMethod,
  tikhonovMethod,
  iteratedTikhonovMethod,
  exponentialFilterMethod,
  filterExpressionMethod,
  sensitivityPriorMethod,
  smoothnessPriorMethod,
  cglsMethod,
  lsqrMethod,
  landweberMethod,
  nuMethod,
  kaczmarzMethod,
  sirtMethod,
  sartMethod,
  totalVariationMethod,
  laggedDiffusivityMethod,
  waveletSparsityMethod,
  boxConstrainedTikhonovMethod,
  gaussNewtonMethod,
  levenbergMarquardtMethod,
  gaussNewtonTotalVariationMethod,
  backProjectionMethod,
  filteredBackProjectionMethod,
  calderonMethod,
  dBarMethod,
  monotonicityMethod,
  factorisationMethod,
  trainedLinearMethod,
  ensembleKalmanMethod,
  crankNicolsonMethod,
];

/** @throws RangeError for an unknown key. */
export const getMethod = (key: string): Method => findByKey(methods, key, 'method');
