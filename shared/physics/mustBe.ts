/**
 * Refuses arguments that are not finite numbers above 0.
 *
 * @param where      name of the function that was called, for the message
 * @param arguments_ by name, in SI
 * @throws {RangeError} naming the first that does not hold, and its value
 */
export function mustBeAboveZero(where: string, arguments_: Record<string, number>): void {
  for (const [name, given] of Object.entries(arguments_)) {
    if (!(given > 0 && given < Infinity)) {
      throw new RangeError(`${where}: ${name} is ${given}, it must be above 0 and finite`);
    }
  }
}

/** As `mustBeAboveZero`, with 0 allowed. */
export function mustNotBeNegative(where: string, arguments_: Record<string, number>): void {
  for (const [name, given] of Object.entries(arguments_)) {
    if (!(given >= 0 && given < Infinity)) {
      throw new RangeError(`${where}: ${name} is ${given}, it must be 0 or more and finite`);
    }
  }
}
