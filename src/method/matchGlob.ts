/**
 * Tells whether a run's path fits a pattern of the site file: `*` within a folder name, `**` across folders, `?` one character.
 *
 * @param path    run path relative to the share, parts joined by `/`
 * @param pattern e.g. `BX-*`, `plant/**`; linear in the lengths for one star a part (no regular expression from outside text)
 */
export function matchGlob(path: string, pattern: string): boolean {
  return matchParts(path.split('/'), pattern.split('/'));
}

function matchParts(path: readonly string[], pattern: readonly string[]): boolean {
  let reachable = new Set([0]);
  for (const part of pattern) {
    const next = new Set<number>();
    for (const at of reachable) {
      if (part === '**') for (let to = at; to <= path.length; to += 1) next.add(to);
      else if (at < path.length && matchName(path[at]!, part)) next.add(at + 1);
    }
    reachable = next;
  }
  return reachable.has(path.length);
}

function matchName(name: string, pattern: string): boolean {
  let [n, p, star, mark] = [0, 0, -1, 0];
  while (n < name.length) {
    if (p < pattern.length && pattern[p] === '*') [star, mark, p] = [p, n, p + 1];
    else if (p < pattern.length && (pattern[p] === '?' || pattern[p] === name[n])) [n, p] = [n + 1, p + 1];
    else if (star >= 0) [p, n, mark] = [star + 1, mark + 1, mark + 1];
    else return false;
  }
  while (pattern[p] === '*') p += 1;
  return p === pattern.length;
}
