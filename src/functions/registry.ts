/** All descriptions, and the ways to find one by its names. */
import { build, type Expression } from '../expression/index.ts';
import { algebraicFunctions } from './algebraic/index.ts';
import { besselFunctions } from './bessel/index.ts';
import type { FunctionDescription } from './description.ts';
import { elementaryFunctions } from './elementary/index.ts';
import { ellipticFunctions } from './elliptic/index.ts';
import { gammaFunctions } from './gamma/index.ts';
import { hypergeometricFunctions } from './hypergeometric/index.ts';
import { integralFunctions } from './integral/index.ts';
import { lambertFunctions } from './lambert/index.ts';
import { languageFamily } from './naming.ts';
import { zetaFunctions } from './zeta/index.ts';

const ALL: readonly FunctionDescription[] = [
  ...elementaryFunctions,
  ...algebraicFunctions,
  ...gammaFunctions,
  ...integralFunctions,
  ...besselFunctions,
  ...ellipticFunctions,
  ...lambertFunctions,
  ...zetaFunctions,
  ...hypergeometricFunctions,
];

const BY_ID: ReadonlyMap<string, FunctionDescription> = new Map(ALL.map((d) => [d.id, d]));

function index(keys: (d: FunctionDescription) => Iterable<string>): ReadonlyMap<string, readonly FunctionDescription[]> {
  const map = new Map<string, FunctionDescription[]>();
  for (const description of ALL) {
    for (const key of new Set(keys(description))) {
      const list = map.get(key);
      if (list) list.push(description);
      else map.set(key, [description]);
    }
  }
  return map;
}

const BY_LATEX = index((d) => d.names.latex.map(plainLatex));
const BY_LETTER = index((d) => d.names.latexLetters ?? []);
const BY_PLAIN = index((d) => [d.id, ...(d.names.plain ?? [])]);
const BY_CODE = index(function* (d) {
  for (const [family, list] of Object.entries(d.names.code)) {
    for (const name of list) yield codeKey(family, name);
  }
});

function codeKey(family: string, name: string): string {
  return `${family}:${family === 'fortran' ? name.toLowerCase() : name}`;
}

/** `\mathrm{erf}`, `\text{erf}`, `\mathop{erf}`, `\operatorname*{erf}` are read as `\operatorname{erf}`. */
function plainLatex(name: string): string {
  return name.replace(/\s+/g, '').replace(/^\\(?:mathrm|text|textrm|mathop|operatorname\*|mathit)\{([^{}]*)\}/, '\\operatorname{$1}');
}

export const allFunctions = (): readonly FunctionDescription[] => ALL;

/** The description of a function id; null if there is none. */
export const describe = (id: string): FunctionDescription | null => BY_ID.get(id) ?? null;

export const acceptsArity = (d: FunctionDescription, count: number): boolean => (typeof d.arity === 'number' ? d.arity === count : count >= d.arity[0] && count <= d.arity[1]);

/** What stands at a name in LaTeX: number of indices (with their place) and number of arguments in the bracket. */
export interface LatexShape {
  readonly indices: number;
  readonly place?: 'subscript' | 'superscript';
  readonly arguments: number;
}

function fits(d: FunctionDescription, shape: LatexShape): boolean {
  const expected = d.names.latexIndices;
  if (shape.indices !== (expected?.count ?? 0)) return false;
  if (expected && shape.place && shape.place !== expected.place) return false;
  return acceptsArity(d, shape.indices + shape.arguments);
}

/**
 * The function of a LaTeX name with its backslash (`\sin`, `\operatorname{erf}`, `\mathrm{erf}`, `\Gamma`).
 * With a shape the candidate that fits it (`\Gamma` with two arguments is the incomplete function); without one, the first. Null where nothing fits.
 */
export function lookupLatex(name: string, shape?: LatexShape): FunctionDescription | null {
  const candidates = BY_LATEX.get(plainLatex(name)) ?? [];
  if (!shape) return candidates[0] ?? null;
  return candidates.find((d) => fits(d, shape)) ?? null;
}

/** The function of a single letter (`J`, `W`, `K`) where index and bracket have its shape; null means the letter is a symbol. */
export function lookupLatexLetter(letter: string, shape: LatexShape): FunctionDescription | null {
  return (BY_LETTER.get(letter) ?? []).find((d) => fits(d, shape)) ?? null;
}

/** The function of a bare library name (no prefix, no float suffix) in a language or family of languages. With `argumentCount` the one that can take so many. */
export function lookupCode(language: string, bareName: string, argumentCount?: number): FunctionDescription | null {
  const family = languageFamily(language) ?? language;
  const candidates = BY_CODE.get(codeKey(family, bareName)) ?? [];
  if (argumentCount === undefined) return candidates[0] ?? null;
  const placeholder = Array.from({ length: argumentCount }, () => build.number(2));
  return candidates.find((d) => libraryArguments(d, family, bareName, placeholder) !== null) ?? null;
}

function libraryArguments(d: FunctionDescription, family: string, name: string, args: readonly Expression[]): readonly Expression[] | null {
  const rule = d.names.codeArguments?.[codeKey(family, name)];
  const mapped = rule ? rule.read(args) : args;
  return mapped && acceptsArity(d, mapped.length) ? mapped : null;
}

/** The call that a library call means, its arguments in the description's order (`besselJ(x, nu)` of R is J_nu(x)); null where the name is unknown or the number of arguments does not fit. */
export function codeCall(language: string, bareName: string, args: readonly Expression[]): Expression | null {
  const family = languageFamily(language) ?? language;
  for (const d of BY_CODE.get(codeKey(family, bareName)) ?? []) {
    const mapped = libraryArguments(d, family, bareName, args);
    if (mapped) return { ...build.call(d.id, ...mapped), written: bareName };
  }
  return null;
}

/** The library call that writes id(args) in a language: bare name and arguments in the library's order; null where the language has none. */
export function codeWriting(language: string, id: string, args: readonly Expression[]): { readonly name: string; readonly args: readonly Expression[] } | null {
  const family = languageFamily(language) ?? language;
  const d = describe(id);
  for (const name of d?.names.code[family] ?? []) {
    const rule = d?.names.codeArguments?.[codeKey(family, name)];
    const mapped = rule ? rule.write(args) : args;
    if (mapped) return { name, args: mapped };
  }
  return null;
}

/** The function of a plain word in comments and plain text (`arctan`, `ln`, `sin`, an id). With `argumentCount` the one that can take so many. */
export function lookupPlain(name: string, argumentCount?: number): FunctionDescription | null {
  const candidates = BY_PLAIN.get(name) ?? [];
  if (argumentCount === undefined) return candidates[0] ?? null;
  return candidates.find((d) => acceptsArity(d, argumentCount)) ?? null;
}
