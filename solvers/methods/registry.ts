import { findByKey } from '../core/registry';
import type { Method } from '../core/types';
import { cglsMethod } from './cgls';
import { gaussNewtonMethod } from './gauss-newton';
import { tikhonovMethod } from './tikhonov';
import { totalVariationMethod } from './total-variation';
import { trivialMethod } from './trivial';
import { truncatedSvdMethod } from './truncated-svd';

export const methods: readonly Method[] = [trivialMethod, truncatedSvdMethod, tikhonovMethod, cglsMethod, totalVariationMethod, gaussNewtonMethod];

/** @throws RangeError for an unknown key. */
export const getMethod = (key: string): Method => findByKey(methods, key, 'method');
