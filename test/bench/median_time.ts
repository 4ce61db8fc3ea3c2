/** Median wall time of a call, ms: repeated until `atLeast` ms and `least` calls are through, after
 * one call that is not counted. */
export function medianTime(call: () => void, atLeast = 400, least = 3, most = 3000): number {
  call();
  const times: number[] = [];
  const begun = performance.now();
  while (times.length < most && (performance.now() - begun < atLeast || times.length < least)) {
    const start = performance.now();
    call();
    times.push(performance.now() - start);
  }
  times.sort((a, b) => a - b);
  return times[times.length >> 1];
}
