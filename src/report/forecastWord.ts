import type { Series } from '../series/series.js';

/**
 * What a forecast time means: ahead of the last point the target is expected then; behind it the fitted law has passed it, and the
 * points that the method asks for in a row have yet to confirm it.
 */
export function forecastWord({ forecast, points }: Series): 'expected' | 'passed by the fitted law, not confirmed yet;' {
  const lastS = points.findLast(({ status }) => status !== 'set-aside')?.elapsedS ?? 0;
  return (forecast?.elapsedS ?? Number.POSITIVE_INFINITY) > lastS ? 'expected' : 'passed by the fitted law, not confirmed yet;';
}
