/** Derivatives that are marked on the name of a symbol. */

/** `y''`, `\dot{x}`, `\ddot{\theta}_1`: the name without its marks and the number of differentiations; `dots` where they are derivatives in time. Null for other symbols. */
export function markedName(symbol: string): { readonly name: string; readonly derivative: number; readonly dots: boolean } | null {
  const dotted = /^\\(d{0,3})dot\{(.+?)\}((?:_.+)?)$/.exec(symbol);
  if (dotted) return { name: `${dotted[2] ?? ''}${dotted[3] ?? ''}`, derivative: (dotted[1] ?? '').length + 1, dots: true };
  const primed = /^([^']+)('+)((?:_.+)?)$/.exec(symbol);
  return primed ? { name: `${primed[1] ?? ''}${primed[3] ?? ''}`, derivative: (primed[2] ?? '').length, dots: false } : null;
}
