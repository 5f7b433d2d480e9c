/** The nearest of known words to a mistyped one, for error messages. */

/**
 * The known word with the fewest edits (insert, drop, replace, swap of neighbours: Damerau 1964, CACM 7, 171) from the
 * one given; undefined where even the best differs in more than a third of its letters.
 */
export function nearestWord(given: string, known: readonly string[]): string | undefined {
  const word = given.slice(0, 60).toLowerCase();
  let best: string | undefined;
  let fewest = Number.POSITIVE_INFINITY;
  for (const candidate of known) {
    const edits = distance(word, candidate.toLowerCase());
    if (edits < fewest && edits <= Math.max(1, Math.floor(candidate.length / 3))) {
      best = candidate;
      fewest = edits;
    }
  }
  // A beginning says more than letters that happen to agree.
  const begun = word.length >= 3 ? known.filter((one) => one.toLowerCase().startsWith(word)) : [];
  return fewest > 1 && begun.length === 1 ? begun[0] : best;
}

function distance(a: string, b: string): number {
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1];
      let edits = Math.min(last[j]! + 1, row[j - 1]! + 1, last[j - 1]! + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) edits = Math.min(edits, before[j - 2]! + 1);
      row.push(edits);
    }
    before = last;
    last = row;
  }
  return last[b.length]!;
}
