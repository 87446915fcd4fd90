/** `-1/2, 1/2`, `[0, pi/4]`: two ends separated by a comma that stands in no bracket. Null where there are not exactly two. */
export function splitInterval(written: string): readonly [string, string] | null {
  const inner = /^\s*\[([^]*)\]\s*$/.exec(written)?.[1] ?? written;
  const parts: string[] = [''];
  let depth = 0;
  for (const character of inner) {
    if ('([{'.includes(character)) depth += 1;
    if (')]}'.includes(character)) depth -= 1;
    if (character === ',' && depth === 0) parts.push('');
    else parts.push((parts.pop() ?? '') + character);
  }
  const [from, to] = parts.map((part) => part.trim());
  return parts.length === 2 && from && to ? [from, to] : null;
}
