/** An Expansion as the protocol's answer fields. */
import { isExactOnSide } from '../bound/index.ts';
import { build, type Expression } from '../expression/index.ts';
import type { Expansion, ExpansionTerm } from '../expand/expansion.ts';
import type { ExpandAnswer, RemainderAnswer, TermAnswer } from '../protocol.ts';
import { equationLatex, expansionLatex, expansionNumeric, expansionText, remainderLatex, toLatex, toPlain } from '../write/index.ts';

const isOne = (e: Expression | null): boolean => e === null || build.isOneNumber(e);

function termAnswer(term: ExpansionTerm): TermAnswer {
  const base = { coefficient: toPlain(term.coefficient), power: toPlain(term.power), log: term.log };
  return term.scale === null ? base : { ...base, scale: toPlain(term.scale) };
}

function remainderAnswer(expansion: Expansion): RemainderAnswer | null {
  const { remainder } = expansion;
  if (!remainder) return null;
  return { latex: remainderLatex(expansion), power: remainder.power === null ? null : toPlain(remainder.power), log: remainder.log };
}

/** A sum without remainder that is not proved to hold along the whole side. */
const nearOnly = ({ point, variable }: Expansion): string => `the sum is the function itself near ${toPlain(variable)} = ${typeof point === 'string' ? point : toPlain(point)}; further away it may differ`;

/** All fields that follow from the expansion alone; `id`, bound, needed and details are added by the caller. */
export function expansionAnswer(expansion: Expansion): ExpandAnswer {
  const exact = isExactOnSide(expansion);
  return {
    ok: true,
    terms: expansion.terms.map(termAnswer),
    ...(isOne(expansion.prefactor) || expansion.prefactor === null ? {} : { prefactor: toPlain(expansion.prefactor) }),
    remainder: remainderAnswer(expansion),
    exact,
    latex: expansionLatex(expansion),
    text: expansionText(expansion),
    equation: equationLatex(expansion),
    numeric: expansionNumeric(expansion),
    ...(expansion.general ? { general: toPlain(expansion.general) } : {}),
    ...(expansion.radius
      ? {
          radius: {
            value: expansion.radius.value === null ? 'inf' : toPlain(expansion.radius.value),
            ...(expansion.radius.nearest ? { nearest: toPlain(expansion.radius.nearest) } : {}),
          },
        }
      : {}),
    ...(expansion.divergent ? { divergent: true } : {}),
    ...(expansion.oscillating ? { oscillating: true } : {}),
    assumptions: expansion.exact && !exact ? [...expansion.assumptions, nearOnly(expansion)] : expansion.assumptions,
    ...(expansion.left ? { left: expansionAnswer(expansion.left) } : {}),
    ...(expansion.branches ? { branches: expansion.branches.map(expansionAnswer) } : {}),
    ...(expansion.components ? { components: expansion.components.map((c) => ({ unknown: toLatex(c.unknown), expansion: expansionAnswer(c.expansion) })) } : {}),
  };
}
