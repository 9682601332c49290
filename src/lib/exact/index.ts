/**
 * The one place for functions that engines round differently. Everything here is built of the operations that
 * ECMAScript defines exactly (+ - * / and Math.sqrt), so that a record recomputes to the last bit elsewhere.
 */
export { exp, ln } from './exp-log';
export { fourthPower, integerPower, quarterRoot, square } from './powers';
export { cos, pi, sin } from './trigonometry';
