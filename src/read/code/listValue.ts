/** Values that are lists of numbers, however the language spells them. */
import type { Code, ListCode } from './syntax.ts';

/** Calls that make a list of their arguments. */
const MAKERS: Readonly<Record<string, RegExp>> = {
  r: /^c$/,
  kotlin: /^(?:listOf|arrayOf|doubleArrayOf|floatArrayOf|mutableListOf)$/,
  java: /^(?:List\.of|Arrays\.asList|DoubleStream\.of)$/,
  glsl: /^(?:float|double)\[\d*\]$/,
  python: /^(?:array\.array|tuple|list)$/,
};
/** Calls that make a list of the list they are given. */
const WRAPPERS: Readonly<Record<string, RegExp>> = {
  python: /^(?:np|numpy|jnp|torch)\.(?:array|asarray|tensor)$|^(?:tuple|list)$/,
  javascript: /^(?:Object\.freeze|Float64Array\.(?:of|from)|Float32Array\.(?:of|from)|Array\.from)$/,
  julia: /^(?:SVector|collect)$/,
};

/** The list that a value is; null for other values. `text` is the document. */
export function listValue(value: Code, family: string, text: string): ListCode | null {
  if (value.kind === 'list') return value;
  if (value.kind === 'group') return listValue(value.inner, family, text);
  if (value.kind !== 'call') return null;
  const callee = text.slice(value.callee.start, value.callee.end).replace(/\s+/g, '');
  const [only] = value.args;
  if (WRAPPERS[family]?.test(callee) && only?.kind === 'list' && value.args.every((a) => a === only || a.kind === 'named')) return only;
  return MAKERS[family]?.test(callee) && value.args.length > 1 && value.args.every((a) => a.kind !== 'named') ? { kind: 'list', items: value.args, start: value.start, end: value.end } : null;
}
