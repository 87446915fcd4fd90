/** The coefficient field of one request: everything of the room behind one interface. */
import { Q, type Assumption, type Expression, type Rational } from '../expression/index.ts';
import { describe as describeFunction, type FunctionDescription } from '../functions/index.ts';
import type { Budget } from '../outcome.ts';
import { zerosOfPolynomial } from './algebraicNumber.ts';
import { createAssumptionStore } from './assumptions.ts';
import { signOfCall } from './callSigns.ts';
import { imaginaryKernel, kernelElement, minus, rationalOf, type Context } from './context.ts';
import { zerosOfCubic } from './cubic.ts';
import { deepZero } from './deepZero.ts';
import { callFunction } from './functions.ts';
import { fromExpression } from './fromExpression.ts';
import { refutedByInverse } from './inverseFunctions.ts';
import { createKernelTable, type Kernel } from './kernel.ts';
import { divideElements } from './powers.ts';
import { exponential, generalPower } from './exponentials.ts';
import { logarithm } from './logarithms.ts';
import { isOnePolynomial, polynomialKey, type Polynomial } from './polynomial.ts';
import { addElements, elementFromPolynomial, elementKey, multiplyElements, negateElement } from './quotient.ts';
import { allKernels, kernelsOf } from './kernelsOf.ts';
import { isQuotient } from './quotientParts.ts';
import { createSignRules, isNonZero, isRealSet, NEGATIVE, NIL, NOT_REAL, POSITIVE, REAL, ANY, type SignSet } from './signs.ts';
import { byImaginaryUnit, singleKernel } from './split.ts';
import { toExpression } from './toExpression.ts';
import type { Element, Field, Sign, Truth } from './types.ts';
import { createZeroTest, signOfBall } from './zero.ts';
import { complex } from '../rigorous/index.ts';

const SIGN_PRECISIONS = [64, 192, 640, 2000] as const;

/**
 * The field under the given assumptions. Symbols are real unless an assumption says otherwise. `describe` finds function descriptions (default: the registry).
 * Rational operations cost about one Rational operation; monomials a merge of exponent lists.
 */
export function createField(assumptions: readonly Assumption[], budget: Budget, describe: (id: string) => FunctionDescription | null | undefined = describeFunction): Field {
  const table = createKernelTable(() => budget.check());
  const facts = createAssumptionStore(table);
  const needed = new Set<string>();
  const zero = createZeroTest(table, describe, facts, (k) => signs.ofKernel(k), (a) => deepZero(ctx, a), (a) => refutedByInverse(ctx, a));
  const signs = createSignRules(table, facts, (k) => signOfOpaque(k), (f) => signOfSum(f));
  const sums = new Map<string, SignSet>();
  const ctx: Context = {
    table,
    budget,
    signs,
    describe,
    isZero: (a) => zero.isZero(a),
    isInteger: (name) => facts.isInteger(name),
    read: (e) => fromExpression(ctx, e),
    calls: new Map(),
    joined: new Map(),
    fractionRoots: new Set(),
    call: (id, args) => callFunction(ctx, id, args),
    signOfNumber(a) {
      // With a parameter the balls only know its samples: no sign follows from them.
      if (!isConstant(a)) return null;
      const s = constantSign(a);
      return s === POSITIVE ? 1 : s === NEGATIVE ? -1 : null;
    },
    signOfRealPart(a) {
      if (!isConstant(a)) return null;
      for (const precision of SIGN_PRECISIONS) {
        const z = zero.enclose(a, precision);
        if (!z && precision > 64) return null;
        const s = z && signOfBall(z);
        if (s !== null) return s;
      }
      return null;
    },
  };

  /** log and call kernels: by balls where they are constants, by their arguments' signs where a rule is known. */
  function signOfOpaque(k: Kernel): SignSet {
    const a = kernelElement(ctx, k);
    const byBall = isConstant(a) ? constantSign(a) : ANY;
    if (byBall !== ANY) return byBall;
    const { shape } = k;
    if (shape.kind === 'log') {
      const inner = signs.of(shape.argument);
      if (inner !== POSITIVE && inner !== (POSITIVE | NIL)) return ANY;
      const above = signs.of(minus(ctx, shape.argument, Q.ONE));
      return isRealSet(above) ? above : REAL;
    }
    return shape.kind === 'call' ? signOfCall(shape.id, shape.args, signs) : ANY;
  }

  const isConstant = (a: Element): boolean => ![...allKernels(table, a)].some((k) => (table.kernels[k] as Kernel).shape.kind === 'parameter');

  function signOfSum(f: Polynomial): SignSet {
    const key = polynomialKey(f);
    let s = sums.get(key);
    if (s === undefined) {
      const a = elementFromPolynomial(table, f);
      s = isConstant(a) ? constantSign(a) : ANY;
      sums.set(key, s);
    }
    return s;
  }

  function constantSign(a: Element): SignSet {
    for (const precision of SIGN_PRECISIONS) {
      const z = zero.enclose(a, precision);
      if (!z && precision > 64) return ANY;
      if (!z) continue;
      if (!complex.isReal(z)) {
        if (z.im.mid > z.im.rad || -z.im.mid > z.im.rad) return NOT_REAL;
        continue;
      }
      const s = signOfBall(z);
      if (s !== null) return s > 0 ? POSITIVE : NEGATIVE;
    }
    return ANY;
  }

  function signSetOf(a: Element): SignSet {
    const direct = signs.of(a);
    if (direct === POSITIVE || direct === NEGATIVE || direct === NIL) return direct;
    if (isQuotient(a) && isConstant(a)) {
      if (zero.isZero(a) === 'yes') return NIL;
      const byBall = constantSign(a);
      if (byBall !== ANY) return byBall & direct || byBall;
    }
    return direct;
  }

  const field: Field = {
    needed,
    fromExpression: (e: Expression) => fromExpression(ctx, e),
    toExpression: (a) => toExpression(ctx, a),
    rational: (value) => (typeof value === 'object' ? value : Q.rational(value)),
    i: kernelElement(ctx, imaginaryKernel(ctx)),
    asRational: rationalOf,
    add: (a, b) => addElements(table, a, b),
    subtract: (a, b) => (isQuotient(b) ? addElements(table, a, negateElement(b)) : isQuotient(a) ? addElements(table, a, Q.negate(b)) : Q.subtract(a, b)),
    negate: negateElement,
    multiply: (a, b) => multiplyElements(table, a, b),
    divide: (a, b) => divideElements(ctx, a, b),
    power: (a, exponent) => generalPower(ctx, a, exponent),
    exp: (a) => exponential(ctx, a),
    log: (a) => logarithm(ctx, a),
    call: (id, args) => callFunction(ctx, id, args),
    zeros(coefficients) {
      const rationals = coefficients.map(rationalOf);
      if (rationals.every((q) => q !== null)) return zerosOfPolynomial(ctx, rationals);
      const [c0, c1, c2, c3] = coefficients;
      return coefficients.length === 4 && c0 && c1 && c2 && c3 ? zerosOfCubic(ctx, [c0, c1, c2, c3]) : null;
    },
    isZero: (a) => zero.isZero(a),
    sign(a): Sign {
      const s = signSetOf(a);
      if (s === POSITIVE || s === (POSITIVE | NIL)) return decided(1, s, a);
      if (s === NEGATIVE || s === (NEGATIVE | NIL)) return decided(-1, s, a);
      if (s === NIL) return 0;
      return field.isReal(a) === 'no' ? 'complex' : 'undecided';
    },
    isReal(a): Truth {
      const s = signSetOf(a);
      if (isRealSet(s)) return 'yes';
      if (s === NOT_REAL) return 'no';
      const { re, im } = byImaginaryUnit(ctx, a);
      if (!isRealSet(signs.of(re)) || !isRealSet(signs.of(im))) return 'undecided';
      const zeroIm = zero.isZero(im);
      return zeroIm === 'yes' ? 'yes' : zeroIm === 'no' ? 'no' : 'undecided';
    },
    equal: (a, b) => zero.isZero(field.subtract(a, b)),
    compare(a, b): Sign {
      if (!isQuotient(a) && !isQuotient(b)) return Q.compare(a as Rational, b as Rational);
      return field.sign(field.subtract(a, b));
    },
    factorsThatMayVanish(a) {
      if (!isQuotient(a)) return [];
      const factors = [...a.monomial.kernels.map((k) => kernelElement(ctx, table.kernels[k] as Kernel)), ...(isOnePolynomial(a.numerator) ? [] : [elementFromPolynomial(table, a.numerator)]), ...a.denominator.map((f) => elementFromPolynomial(table, f.polynomial))];
      return factors.flatMap(bare).filter((u, i, all) => !isNonZero(signs.of(u)) && all.findIndex((v) => elementKey(v) === elementKey(u)) === i);
    },
    require: (assumption) => void needed.add(assumption),
    parameters(a) {
      return [...allKernels(table, a)]
        .sort((x, y) => x - y)
        .map((k) => (table.kernels[k] as Kernel).shape)
        .flatMap((s) => (s.kind === 'parameter' ? [s.name] : []));
    },
    key: elementKey,
  };

  /** |u| and the base of a root vanish where u does; exponentials and i never. */
  function bare(u: Element): readonly Element[] {
    const single = singleKernel(u);
    // A root was replaced by what stands under it.
    if (!single && isQuotient(u) && u.monomial.kernels.length > 0) return field.factorsThatMayVanish(u);
    const shape = single ? (table.kernels[single.kernel] as Kernel).shape : null;
    if (shape?.kind === 'abs') return field.factorsThatMayVanish(shape.argument);
    if (shape?.kind === 'radicand' || shape?.kind === 'power') return field.factorsThatMayVanish(shape.base);
    return shape?.kind === 'exp' || shape?.kind === 'imaginary' ? [] : [u];
  }

  /** A sign that only zero could spoil: the parameters that must not vanish become part of the result. */
  function decided(sign: 1 | -1, s: SignSet, a: Element): Sign {
    if ((s & NIL) !== 0) {
      if (isConstant(a)) return 'undecided';
      for (const k of kernelsOf(a)) {
        const { shape } = table.kernels[k] as Kernel;
        if (shape.kind === 'parameter' && (facts.signOf(shape.name) & NIL) !== 0) needed.add(`${shape.name} != 0`);
      }
    }
    return sign;
  }

  for (const a of assumptions) if (a.kind === 'domain' && a.domain !== 'operator') facts.setDomain(a.symbol, a.domain);
  for (const a of assumptions) if (a.kind === 'relation') facts.note(field.subtract(field.fromExpression(a.left), field.fromExpression(a.right)), a.relation);
  signs.reset();
  sums.clear();
  ctx.calls.clear();
  ctx.joined.clear();
  return field;
}
