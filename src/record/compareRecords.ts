export interface Difference {
  readonly path: string;
  readonly before: string;
  readonly after: string;
}

/** The name of the program version is not a number of the measurement. */
const passedOver = new Set(['program']);
const least = 1e-9;

/**
 * Finds the first difference between two records that is more than rounding.
 *
 * @param toleranceRelative largest relative difference of two numbers that counts as the same; numbers below 1e-9 count as zero
 */
export function compareRecords(before: unknown, after: unknown, toleranceRelative: number, path = ''): Difference | undefined {
  const different = (): Difference => ({ path: path === '' ? 'the whole' : path, before: shown(before), after: shown(after) });
  if (typeof before === 'number' && typeof after === 'number') {
    const scale = Math.max(Math.abs(before), Math.abs(after), least);
    return Math.abs(before - after) <= toleranceRelative * scale ? undefined : different();
  }
  if (before === null || after === null || typeof before !== 'object' || typeof after !== 'object') {
    return Object.is(before, after) ? undefined : different();
  }
  const keys = new Set([...Object.keys(before), ...Object.keys(after)]);
  for (const key of [...keys].sort()) {
    if (passedOver.has(key)) continue;
    const inner = compareRecords(
      (before as Record<string, unknown>)[key],
      (after as Record<string, unknown>)[key],
      toleranceRelative,
      path === '' ? key : `${path}.${key}`,
    );
    if (inner !== undefined) return inner;
  }
  return undefined;
}

function shown(value: unknown): string {
  const text = value === undefined ? 'nothing' : JSON.stringify(value);
  return text.length > 60 ? `${text.slice(0, 57)}...` : text;
}
