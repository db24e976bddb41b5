/**
 * A function that does its work the first time and gives the same result ever after.
 * @template Result
 * @param {() => Result} work
 * @returns {() => Result}
 */
export function once(work) {
  /** @type {{ result: Result } | null} */
  let done = null;
  return () => (done ??= { result: work() }).result;
}
