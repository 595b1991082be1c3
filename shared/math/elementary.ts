/**
 * The only door to elementary functions. The built-in ones differ in the last bit between JavaScript engines; these are
 * pure arithmetic and give the same bits everywhere.
 */
export { default as besselj0 } from "@stdlib/math-base-special-besselj0";
export { default as exp } from "@stdlib/math-base-special-exp";
export { default as ln } from "@stdlib/math-base-special-ln";
export { default as log10 } from "@stdlib/math-base-special-log10";
export { default as sin } from "@stdlib/math-base-special-sin";
export { default as tanh } from "@stdlib/math-base-special-tanh";

import sincosBoth from "@stdlib/math-base-special-sincos";

/** sincos(x, out, stride, offset) writes sin(x) to out[offset] and cos(x) to out[offset + stride]. */
export const sincos: (x: number, out: Float64Array, stride: number, offset: number) => void = sincosBoth.assign;
