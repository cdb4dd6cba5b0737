import stdAsin from '@stdlib/math-base-special-asin';
import stdCos from '@stdlib/math-base-special-cos';
import stdExp from '@stdlib/math-base-special-exp';
import stdLn from '@stdlib/math-base-special-ln';
import stdSin from '@stdlib/math-base-special-sin';

/**
 * Elementary functions that give the same bits in every engine. ECMAScript leaves `Math.sin` and its kin to
 * the engine, and two versions of one engine do differ in the last digit; differences of fits make that a
 * sixth digit. These are written in plain arithmetic and square roots, which IEEE 754 fixes to the bit.
 * Everything in shared/ uses them; lint refuses the others there.
 *
 * @see ECMA-262, 21.3.2: results of these functions are implementation-approximated
 * @see FreeBSD msun, ported by @stdlib; errors below one unit in the last place
 */
export const sin: (x: number) => number = stdSin;
export const cos: (x: number) => number = stdCos;
export const asin: (x: number) => number = stdAsin;
export const exp: (x: number) => number = stdExp;
export const log: (x: number) => number = stdLn;

/** x to the power y, x > 0; good to about |y ln x| units in the last place. Squares are written `x ** 2`. */
export const pow = (x: number, y: number): number => exp(y * log(x));
