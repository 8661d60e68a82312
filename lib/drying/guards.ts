/**
 * Stops a value that is not a number inside its range before it reaches a formula.
 * `null` and numeric strings would otherwise count as 0 degC or be added as text.
 *
 * @throws {RangeError} with a sentence that names the value, its range and what came.
 */
export function assertWithin(name: string, value: unknown, min: number, max: number): asserts value is number {
  if (typeof value !== 'number' || !(value >= min && value <= max)) {
    throw new RangeError(`${name} must be a number from ${min} to ${max}, not ${JSON.stringify(value) ?? typeof value}.`)
  }
}
