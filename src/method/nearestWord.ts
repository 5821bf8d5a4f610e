/**
 * The known word nearest to a mistyped one, when it is near enough to be meant.
 *
 * @returns the word at the least edit distance, at most 2, or a third of the length of longer words
 * @source Levenshtein, Soviet Physics Doklady 1966, 10, 707
 */
export function nearestWord(word: string, known: readonly string[]): string | undefined {
  const reach = Math.max(2, Math.floor(word.length / 3));
  let best: { name: string; distance: number } | undefined;
  for (const name of known) {
    const distance = editDistance(word.toLowerCase().slice(0, 100), name.toLowerCase());
    if (distance <= reach && (!best || distance < best.distance)) best = { name, distance };
  }
  return best?.name;
}

/** Insertions, deletions and replacements that turn one word into another. */
export function editDistance(a: string, b: string): number {
  let previous = Array.from({ length: b.length + 1 }, (_, index) => index);
  for (let i = 1; i <= a.length; i += 1) {
    const current = [i];
    for (let j = 1; j <= b.length; j += 1) {
      current.push(Math.min(previous[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1), previous[j]! + 1, current[j - 1]! + 1));
    }
    previous = current;
  }
  return previous[b.length]!;
}
