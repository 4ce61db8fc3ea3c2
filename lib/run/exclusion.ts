/** A reading that is left out of fits. */
export interface Exclusion {
  /** Which reading. */
  readonly index: number;
  /** Why. */
  readonly reason: string;
}

/** Checks exclusions and puts them in the order of the readings.
 *
 * @param given the exclusions @param count number of readings @param where for the message
 * @throws {RangeError} on a reading that does not exist or a missing reason */
export function readExclusions(
  given: readonly Exclusion[],
  count: number,
  where: string,
): readonly Exclusion[] {
  for (const { index, reason } of given) {
    if (!Number.isInteger(index) || index < 0 || index >= count) {
      throw new RangeError(
        `Cannot leave out reading ${index} of ${where}: its readings are 0 to ${count - 1}`,
      );
    }
    if (typeof reason !== "string" || reason.trim() === "") {
      throw new RangeError(`Cannot leave out reading ${index} of ${where} without a reason`);
    }
  }
  return given.toSorted((a, b) => a.index - b.index);
}
