/** Filling the writing of a function (`J_{\nu}(x)`) with arguments that may need parentheses where the template does not enclose them. */

/** For each argument, whether the template encloses it on both sides: `(x)`, `{x}`, `, x)`. Found by a trial with marks that no notation uses. */
export function enclosedArguments(form: (args: readonly string[]) => string, count: number): readonly boolean[] {
  const marks = Array.from({ length: count }, (_, i) => String.fromCodePoint(0xe000 + i));
  const text = form(marks);
  return marks.map((mark) => {
    let enclosed = true;
    for (let at = text.indexOf(mark); at >= 0; at = text.indexOf(mark, at + 1)) {
      const before = text.slice(0, at).trimEnd().at(-1) ?? '';
      const after = text.slice(at + 1).trimStart().at(0) ?? '';
      enclosed &&= /[({[,;|⌊⌈⁽]/.test(before) && /[)}\],;|⌋⌉⁾]/.test(after);
    }
    return enclosed;
  });
}

/** True for a name with indices and one bracket at its end (`J_{0}(x)`, `\Gamma(x)`, `\operatorname{Ai}'(x)`), which takes a power without further parentheses. */
export function isCallShape(text: string): boolean {
  if (!/^\\?[\p{L}]/u.test(text) || !text.endsWith(')')) return false;
  let depth = 0;
  for (let i = text.length - 1; i >= 0; i -= 1) {
    const sign = text[i];
    if (sign === ')' || sign === '}') depth += 1;
    else if (sign === '(' || sign === '{') {
      depth -= 1;
      if (depth === 0) return /^\\?[\p{L}]+(?:\{[\p{L}]+\})?'*(?:_(?:\{[^{}]*\}|.))?$/u.test(text.slice(0, i).replace(/\\left$/, ''));
    }
  }
  return false;
}
