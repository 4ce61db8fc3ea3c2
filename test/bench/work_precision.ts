/** One run: what it delivered and what it took. */
export interface WorkPoint {
  readonly error: number;
  readonly ms: number;
}

/** Time that a line of runs needs for a given delivered error, interpolated between its best runs on
 * logarithmic scales. Looser than its loosest run, that run's time is taken (which is too long);
 * tighter than its tightest, the line is not extended and the answer is NaN. */
export function timeAt(line: readonly WorkPoint[], error: number): number {
  const front = bestRuns(line);
  if (front.length === 0) return NaN;
  if (error >= front[0].error) return front[0].ms;
  for (let i = 1; i < front.length; i++) {
    const [a, b] = [front[i - 1], front[i]];
    if (error < b.error) continue;
    const share = Math.log(error / a.error) / Math.log(b.error / a.error);
    return a.ms * Math.pow(b.ms / a.ms, share);
  }
  return NaN;
}

/** The runs that no other run beats in both error and time, loosest first. */
export function bestRuns(line: readonly WorkPoint[]): WorkPoint[] {
  const sound = line.filter(({ error, ms }) => error > 0 && error < Infinity && ms > 0);
  const front = sound.filter((a) =>
    !sound.some((b) =>
      b !== a && b.error <= a.error && b.ms <= a.ms && (b.error < a.error || b.ms < a.ms)
    )
  );
  return front.sort((a, b) => b.error - a.error);
}

/** Geometric mean of what is a number. */
export function geometricMean(values: readonly number[]): number {
  const sound = values.filter((v) => v > 0 && v < Infinity);
  return Math.exp(sound.reduce((sum, v) => sum + Math.log(v), 0) / sound.length);
}
