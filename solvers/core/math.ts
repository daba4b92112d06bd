/**
 * Transcendental functions with the same bits on every engine. `Math.sin`, `Math.exp` and their kin may differ in the last
 * bit between engines (ECMA-262 leaves their precision open); these are plain arithmetic. `Math.sqrt`, `abs`, `floor`, `min`
 * and `max` are exact and may be used as they are.
 */
export { default as sin } from '@stdlib/math-base-special-sin';
export { default as cos } from '@stdlib/math-base-special-cos';
export { default as tan } from '@stdlib/math-base-special-tan';
export { default as exp } from '@stdlib/math-base-special-exp';
export { default as expm1 } from '@stdlib/math-base-special-expm1';
export { default as ln } from '@stdlib/math-base-special-ln';
export { default as log1p } from '@stdlib/math-base-special-log1p';
export { default as log10 } from '@stdlib/math-base-special-log10';
export { default as pow } from '@stdlib/math-base-special-pow';
export { default as atan } from '@stdlib/math-base-special-atan';
export { default as atan2 } from '@stdlib/math-base-special-atan2';
export { default as asin } from '@stdlib/math-base-special-asin';
export { default as acos } from '@stdlib/math-base-special-acos';
export { default as cbrt } from '@stdlib/math-base-special-cbrt';
export { default as sinh } from '@stdlib/math-base-special-sinh';
export { default as cosh } from '@stdlib/math-base-special-cosh';
export { default as tanh } from '@stdlib/math-base-special-tanh';
export { default as erf } from '@stdlib/math-base-special-erf';
export { default as erfinv } from '@stdlib/math-base-special-erfinv';
export { default as gammaln } from '@stdlib/math-base-special-gammaln';
