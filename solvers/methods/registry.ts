import { findByKey } from '../core/registry';
import type { Method } from '../core/types';
import { cglsMethod } from './cgls';
import { exponentialFilterMethod } from './exponential-filter';
import { gaussNewtonMethod } from './gauss-newton';
import { iteratedTikhonovMethod } from './iterated-tikhonov';
import { kaczmarzMethod } from './kaczmarz';
import { landweberMethod } from './landweber';
import { lsqrMethod } from './lsqr';
import { nuMethod } from './nu-method';
import { sensitivityPriorMethod } from './sensitivity-prior';
import { smoothnessPriorMethod } from './smoothness-prior';
import { sirtMethod } from './sirt';
import { tikhonovMethod } from './tikhonov';
import { totalVariationMethod } from './total-variation';
import { trivialMethod } from './trivial';
import { truncatedSvdMethod } from './truncated-svd';

export const methods: readonly Method[] = [
  trivialMethod,
  truncatedSvdMethod,
  tikhonovMethod,
  iteratedTikhonovMethod,
  exponentialFilterMethod,
  sensitivityPriorMethod,
  smoothnessPriorMethod,
  cglsMethod,
  lsqrMethod,
  landweberMethod,
  nuMethod,
  kaczmarzMethod,
  sirtMethod,
  totalVariationMethod,
  gaussNewtonMethod,
];

/** @throws RangeError for an unknown key. */
export const getMethod = (key: string): Method => findByKey(methods, key, 'method');
