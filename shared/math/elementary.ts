/**
 * The only door to elementary functions. The built-in ones differ in the last bit between JavaScript engines; these are
 * pure arithmetic and give the same bits everywhere.
 */
export { default as ln } from "@stdlib/math-base-special-ln";
export { default as sin } from "@stdlib/math-base-special-sin";
export { default as tanh } from "@stdlib/math-base-special-tanh";

import sincosBoth from "@stdlib/math-base-special-sincos";

/** sincos(x, out, stride, offset) writes sin(x) to out[offset] and cos(x) to out[offset + stride]. */
export const sincos: (x: number, out: Float64Array, stride: number, offset: number) => void = sincosBoth.assign;
