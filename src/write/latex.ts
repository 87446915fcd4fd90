/** Expression -> LaTeX as an author types it. */
import { build, type DocumentStyle, type Expression, PLAIN_STYLE, Q, type Relation } from '../expression/index.ts';
import { splitSign } from './factors.ts';
import { atom, BARE_NAMES, glue, Level, spaced, standardCommand, standsBare, withGrowingBrackets, withPrimes, type Written } from './latexPieces.ts';
import { writeVector } from './latexVectors.ts';
import { describe } from './names.ts';
import { latexSymbol } from './symbols.ts';
import { enclosedArguments, isCallShape } from './template.ts';

const RELATIONS: Readonly<Record<Relation, string>> = {
  '=': '=',
  about: '\\approx',
  tilde: '\\sim',
  to: '\\to',
  define: ':=',
  '<': '<',
  '<=': '\\le',
  '>': '>',
  '>=': '\\ge',
  '!=': '\\ne',
  propto: '\\propto',
  ll: '\\ll',
  gg: '\\gg',
};

const CONSTANTS: Readonly<Record<string, string>> = { pi: '\\pi', eulerGamma: '\\gamma', catalan: 'G', glaisher: 'A', infinity: '\\infty' };
/** Letters that readers of a formula take for functions when a parenthesis follows. */
const FUNCTION_LETTERS = /^(?:[fghuyFGHUWY]|\\(?:phi|psi|Phi|Psi|Gamma|zeta))(?:_|'|$)/;

/** LaTeX of the expression in the given style. Total: every tree can be written. Cost linear in the size of the text. */
export function toLatex(expression: Expression, style: DocumentStyle = PLAIN_STYLE): string {
  return new LatexWriter(style).write(expression).text;
}

/** One style of writing. Methods give the text with what its surroundings must know of it. */
export class LatexWriter {
  readonly style: DocumentStyle;
  constructor(style: DocumentStyle) {
    this.style = style;
  }

  write(e: Expression): Written {
    switch (e.kind) {
      case 'number':
        return this.number(e);
      case 'constant':
        return atom(e.name === 'e' ? this.style.euler : e.name === 'i' ? this.style.imaginary : (CONSTANTS[e.name] ?? e.name));
      case 'symbol':
        return atom(latexSymbol(e.name));
      case 'dots':
        return atom(this.style.dots);
      case 'sum':
        return this.sum(e.terms);
      case 'negation': {
        const inner = this.at(e.operand, Level.Product);
        return { text: `-${inner.text}`, level: Level.Sum, tall: inner.tall };
      }
      case 'product':
        return this.product(e.factors);
      case 'quotient':
        return this.quotient(e.numerator, e.denominator);
      case 'power':
        return this.power(e.base, e.exponent);
      case 'root': {
        const inner = this.write(e.radicand);
        const degree = e.degree.kind === 'number' && e.degree.value.num === 2n ? '' : `[${this.write(e.degree).text}]`;
        return { text: `\\sqrt${degree}{${inner.text}}`, level: Level.Atom, tall: inner.tall };
      }
      case 'call':
        return this.call(e.function, e.args);
      case 'apply':
        return this.apply(e.name, e.args, e.derivatives);
      case 'order':
        return this.order(e.little, e.argument);
      case 'derivative': {
        const over = e.times === 1 ? '' : `^{${e.times}}`;
        const variable = this.write(e.variable).text;
        const body = this.at(e.body, Level.Prefix);
        const numerator = over === '' ? 'd' : `d^${e.times < 10 ? e.times : `{${e.times}}`}`;
        return { text: `\\frac{${numerator}}{d${variable}${over === '' ? '' : numerator.slice(1)}}${spaced(body.text)}`, level: Level.Prefix, tall: true };
      }
      case 'integral': {
        const limits = `${e.lower ? `_{${this.write(e.lower).text}}` : ''}${e.upper ? `^{${this.write(e.upper).text}}` : ''}`;
        const body = this.at(e.body, Level.Product).text;
        return { text: `\\int${limits} ${body}\\,d${this.write(e.variable).text}`, level: Level.Product, tall: true };
      }
      case 'indexedSum':
      case 'indexedProduct': {
        const sign = e.kind === 'indexedSum' ? '\\sum' : '\\prod';
        const body = this.at(e.body, Level.Product).text;
        return { text: `${sign}_{${this.write(e.index).text}=${this.write(e.lower).text}}^{${this.write(e.upper).text}} ${body}`, level: Level.Product, tall: true };
      }
      case 'limit': {
        const body = this.at(e.body, Level.Product).text;
        return { text: `\\lim_{${this.write(e.variable).text} \\to ${this.write(e.target).text}} ${body}`, level: Level.Product, tall: true };
      }
      case 'piecewise': {
        const rows = e.branches.map((b) => `${this.write(b.value).text} & ${b.condition ? this.write(b.condition).text : '\\text{otherwise}'}`);
        return { text: `\\begin{cases} ${rows.join(' \\\\ ')} \\end{cases}`, level: Level.Atom, tall: true };
      }
      case 'relation': {
        const sides = e.sides.map((s) => this.at(s, Level.Sum));
        const text = sides.map((s, i) => (i === 0 ? s.text : `${RELATIONS[e.relations[i - 1] ?? '=']} ${s.text}`)).join(' ');
        return { text, level: Level.Relation, tall: sides.some((s) => s.tall) };
      }
      case 'vector':
        return writeVector(this, e.operation, e.name, e.args);
    }
  }

  /** The part as it stands where at least this level is needed. */
  at(e: Expression, level: Level): Written {
    const written = this.write(e);
    return written.level >= level ? written : this.parenthesised(written);
  }

  parenthesised(inner: Written): Written {
    const grows = inner.tall && this.style.parentheses === 'auto';
    return { text: grows ? `\\left(${inner.text}\\right)` : `(${inner.text})`, level: Level.Atom, tall: inner.tall };
  }

  number(e: Extract<Expression, { kind: 'number' }>): Written {
    const { value, written } = e;
    if (written !== undefined && /^\d*\.\d+$|^\d+\.?$/.test(written)) {
      const exact = Q.fromDecimal(written);
      if (exact && Q.equal(exact, value)) return atom(written);
    }
    if (value.num < 0n) {
      const inner = this.number(build.number(Q.negate(value)) as typeof e);
      return { text: `-${inner.text}`, level: Level.Sum, tall: inner.tall };
    }
    return value.den === 1n ? atom(`${value.num}`) : this.fraction(atom(`${value.num}`), atom(`${value.den}`));
  }

  fraction(above: Written, below: Written): Written {
    if (this.style.fraction !== 'slash') return { text: `${this.style.fraction}{${above.text}}{${below.text}}`, level: Level.Power, tall: true };
    const top = above.level >= Level.Product && above.open !== true ? above : this.parenthesised(above);
    const bottom = below.level >= Level.Power ? below : this.parenthesised(below);
    return { text: `${top.text}/${bottom.text}`, level: Level.Product, tall: top.tall || bottom.tall };
  }

  quotient(numerator: Expression, denominator: Expression): Written {
    const { negative, magnitude } = splitSign(numerator);
    if (negative && magnitude.kind !== 'sum') {
      const inner = this.fraction(this.write(magnitude), this.write(denominator));
      return { text: `-${inner.text}`, level: Level.Sum, tall: inner.tall };
    }
    return this.fraction(this.write(numerator), this.write(denominator));
  }

  sum(terms: readonly Expression[]): Written {
    let text = '';
    let tall = false;
    terms.forEach((term, i) => {
      const { negative, magnitude } = splitSign(term);
      const inner = this.at(magnitude, Level.Product);
      tall ||= inner.tall;
      text += i === 0 ? `${negative ? '-' : ''}${inner.text}` : ` ${negative ? '-' : '+'} ${inner.text}`;
    });
    return { text, level: Level.Sum, tall };
  }

  product(nested: readonly Expression[]): Written {
    const factors = nested.flatMap((f) => (f.kind === 'product' && !splitSign(f).negative ? f.factors : [f]));
    const { negative, magnitude } = splitSign({ kind: 'product', factors });
    if (negative) {
      const inner = this.at(magnitude, Level.Product);
      return { text: `-${inner.text}`, level: Level.Sum, tall: inner.tall };
    }
    let text = '';
    let tall = false;
    let ends = false;
    factors.forEach((factor, i) => {
      const last = i === factors.length - 1;
      let inner = this.write(factor);
      const besideVector = factor.kind === 'vector' && factor.operation === 'dot' && factors.some((f) => f !== factor && (f.kind === 'vector' || (f.kind === 'power' && f.base.kind === 'vector')));
      const open = besideVector || inner.open === true || inner.level === Level.Prefix || (inner.level === Level.Product && factor.kind !== 'product' && factor.kind !== 'quotient');
      if (inner.level < Level.Product || (open && !last) || besideVector || (inner.level === Level.Product && (factor.kind === 'quotient' || factor.kind === 'number') && this.style.fraction === 'slash')) {
        inner = factor.kind === 'call' && inner.level === Level.Prefix ? this.call(factor.function, factor.args, true) : this.parenthesised(inner);
      }
      tall ||= inner.tall;
      ends = inner.open === true;
      text = i === 0 ? inner.text : this.juxtapose(text, factors[i - 1], inner.text, factor);
    });
    return { text, level: Level.Product, tall, open: ends };
  }

  juxtapose(left: string, leftFactor: Expression | undefined, right: string, rightFactor: Expression): string {
    const digitStarts = /^[\d.]/.test(right);
    if (digitStarts || rightFactor.kind === 'dots' || leftFactor?.kind === 'dots') return `${left} \\cdot ${right}`;
    const opens = /^(?:\\left)?[([]/.test(right);
    if (opens && leftFactor?.kind === 'symbol' && FUNCTION_LETTERS.test(leftFactor.name)) return `${left} \\cdot ${right}`;
    if (opens && leftFactor?.kind === 'apply') return `${left} \\cdot ${right}`;
    if (/^(?:\\[dt]?frac)/.test(right) && leftFactor?.kind === 'number') return `${left} \\cdot ${right}`;
    return (/[A-Za-z})]$/.test(left) || /\^\d$/.test(left)) && /^[A-Za-z\\(]/.test(right) ? `${left} ${right}` : left + right;
  }

  power(base: Expression, exponent: Expression): Written {
    if (base.kind === 'constant' && base.name === 'e' && this.style.exponential === '\\exp') return this.prefixCall('\\exp', [this.write(exponent)], [exponent], false);
    if (exponent.kind === 'number' && exponent.value.num === 1n && exponent.value.den === 2n && exponent.written === undefined) {
      const inner = this.write(base);
      return { text: `\\sqrt{${inner.text}}`, level: Level.Atom, tall: inner.tall };
    }
    const upper = this.exponent(exponent);
    if (base.kind === 'call' && exponent.kind === 'number' && Q.isInteger(exponent.value) && exponent.value.num > 1n) {
      const name = base.function === 'exp' && this.style.exponential === 'power' ? null : this.commandName(base.function);
      if (name !== null && BARE_NAMES.test(name) && base.args.length === 1) {
        const args = base.args.map((a) => this.write(a));
        return this.prefixCall(`${name}^${upper.text}`, args, base.args, false);
      }
    }
    let inner = this.write(base);
    const needsParentheses = inner.level < Level.Atom || base.kind === 'power' || base.kind === 'root' || base.kind === 'quotient' || (base.kind === 'number' && base.value.den !== 1n) || (base.kind === 'apply' && base.args.length > 0);
    if (needsParentheses) inner = this.parenthesised(inner);
    if (base.kind === 'symbol' && /\^(?:\*|\\[A-Za-z]+|\{[^{}]*\})$/.test(inner.text)) inner = this.parenthesised(inner);
    const text = /'+$/.test(inner.text) ? `{${inner.text}}^${upper.text}` : `${inner.text}^${upper.text}`;
    return { text, level: Level.Power, tall: inner.tall };
  }

  /** For exponents and indices: fractions with a slash. */
  small(): LatexWriter {
    return new LatexWriter({ ...this.style, fraction: 'slash' });
  }

  /** The exponent with its braces, or the single digit or letter without. */
  exponent(e: Expression): { text: string } {
    const text = this.small().write(e).text;
    return { text: /^[A-Za-z0-9]$/.test(text) ? text : `{${text}}` };
  }

  commandName(id: string): string | null {
    if (id === 'log') return this.style.logarithm;
    if (id === 'exp') return '\\exp';
    const known = describe(id);
    if (known?.names.latexForm) return null;
    return standardCommand(known?.names.latex[0] ?? `\\operatorname{${id.replace(/_/g, '\\_')}}`);
  }

  call(id: string, args: readonly Expression[], delimited = false): Written {
    const indices = describe(id)?.names.latexIndices?.count ?? 0;
    const written = args.map((a, i) => (i < indices ? { ...this.small().write(a), tall: false } : this.write(a)));
    const texts = written.map((w) => w.text);
    const tall = written.some((w) => w.tall);
    const [first] = written;
    if (id === 'exp' && first && this.style.exponential === 'power') return { text: `${this.style.euler}^{${args[0] ? this.small().write(args[0]).text : ''}}`, level: Level.Power, tall: false };
    if (id === 'abs' && first) return { text: `\\left|${first.text}\\right|`, level: Level.Atom, tall };
    if (id === 'factorial' && args[0]) {
      const inner = this.at(args[0], Level.Atom);
      return { text: `${inner.text}!`, level: Level.Power, tall };
    }
    const form = describe(id)?.names.latexForm;
    if (form) {
      const safe = enclosedArguments(form, args.length);
      const plain = form(written.map((w, i) => (safe[i] === true || w.level >= Level.Power ? w : this.parenthesised(w)).text));
      const text = tall && this.style.parentheses === 'auto' ? withGrowingBrackets(plain, texts) : plain;
      return { text, level: isCallShape(text) && !/^\\(?:ln|log|(?:arc)?(?:sin|cos|tan))/.test(text) ? Level.Atom : Level.Power, tall };
    }
    return this.prefixCall(this.commandName(id) ?? `\\operatorname{${id}}`, written, args, delimited);
  }

  prefixCall(name: string, written: readonly Written[], args: readonly Expression[], delimited: boolean): Written {
    const [only] = args;
    const tall = written.some((w) => w.tall);
    const text = written.map((w) => w.text).join(', ');
    if (args.length === 1 && only && !delimited && BARE_NAMES.test(name) && standsBare(only, text) && !(only.kind === 'product' && /^\\l/.test(name))) return { text: glue(name, `${/^[A-Za-z0-9]/.test(text) ? ' ' : ''}${text}`), level: Level.Prefix, tall, open: true };
    const grows = tall && this.style.parentheses === 'auto';
    return { text: grows ? `${name}\\left(${text}\\right)` : `${name}(${text})`, level: name.includes('^') || args.length !== 1 || BARE_NAMES.test(name) ? Level.Power : Level.Atom, tall };
  }

  apply(name: string, args: readonly Expression[], derivatives: readonly number[]): Written {
    const base = latexSymbol(name);
    const written = args.map((a) => this.write(a));
    const tall = written.some((w) => w.tall);
    const list = written.map((w) => w.text).join(', ');
    const inside = args.length === 0 ? '' : tall && this.style.parentheses === 'auto' ? `\\left(${list}\\right)` : `(${list})`;
    const [only = 0] = derivatives;
    if (derivatives.length <= 1) {
      const mark = only <= 3 ? "'".repeat(only) : `^{(${only})}`;
      return { text: `${mark === '' ? base : withPrimes(base, mark)}${inside}`, level: Level.Atom, tall };
    }
    if (derivatives.every((d) => d === 0)) return { text: `${base}${inside}`, level: Level.Atom, tall };
    if (args.length === derivatives.length && args.every((a) => a.kind === 'symbol' && latexSymbol(a.name).length === 1)) {
      const index = args.map((a, i) => (a.kind === 'symbol' ? a.name.repeat(derivatives[i] ?? 0) : '')).join('');
      return { text: `${base}_{${index}}${inside}`, level: Level.Atom, tall };
    }
    return { text: `${base}^{(${derivatives.join(',')})}${inside}`, level: Level.Atom, tall };
  }

  order(little: boolean, argument: Expression): Written {
    const inner = this.write(argument);
    const { macro, little: littleMacro, argument: form } = this.style.order;
    const name = little ? littleMacro : macro;
    if (form === 'braces') return { text: `${name}{${inner.text}}`, level: Level.Atom, tall: inner.tall };
    const grows = form === 'growing' || (inner.tall && this.style.parentheses === 'auto');
    return { text: grows ? `${name}\\left(${inner.text}\\right)` : `${name}(${inner.text})`, level: Level.Atom, tall: inner.tall };
  }

}
