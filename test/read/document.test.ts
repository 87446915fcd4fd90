/** Documents: LaTeX, Markdown, code comments. Delimiters and environments: LaTeX2e and amsmath user's guides; Markdown mathematics as GitHub documents it (from memory). */
import { describe, expect, it } from 'vitest';
import { documentStyle, findComments, languageOf, readDocument, readFormula } from '../../src/read/index.ts';
import { processorTime } from '../setup.ts';
import { shown } from './shown.ts';

const summary = (text: string, language: string): string[] =>
  readDocument(text, language).regions.map((r) => `${r.kind}${r.environment ? ` ${r.environment}` : ''} ${r.language}: ${text.slice(r.contentStart, r.contentEnd).trim()}`);

const formulas = (text: string, language: string): string[] => {
  const content = readDocument(text, language);
  return content.regions.flatMap((r) =>
    r.formulas.map((f) => {
      const read = readFormula(text, 'latex', { start: f.start, end: f.end, macros: content.macros, joinRows: true });
      return `${f.label ?? ''}${f.tag ? `(${f.tag})` : ''}|${read.ok ? shown(read.value.expression) : read.error.message}`;
    }),
  );
};

describe('LaTeX documents', () => {
  it('finds inline and display mathematics, and nothing else', () => {
    const text = String.raw`Price \$5 % $no$
$a$ and \(b\) and \[c\] and $$d$$ \verb|$e$| \lstinline!$f$!
\begin{verbatim} $g$ \end{verbatim}
\begin{equation*} h \end{equation*} \begin{comment} $i$ \end{comment}
\newcommand{\x}{$j$} \def\y{$k$} \text{$l$} {\it $m$}
$\text{if $n$ then}$`;
    expect(summary(text, 'latex')).toEqual(['inline latex: a', 'inline latex: b', 'display latex: c', 'display latex: d', 'environment equation* latex: h', 'inline latex: l', 'inline latex: m', 'inline latex: \\text{if $n$ then}']);
  });

  it('joins continued rows and keeps labels and tags', () => {
    const text = String.raw`\newcommand{\half}{\tfrac12}
\begin{align}
 \cos x &= 1 - \half x^2 \label{eq:a} \\
        &\quad + \frac{x^4}{24} + \dots \\[2pt]
 e^x &= 1 + x \tag{7}
\end{align}
\begin{equation}\label{q} \begin{split} f(x) &= x \\ &+ x^2 \end{split} \end{equation}
\begin{gather} a = b \\ c = d \end{gather}
\begin{multline} a + b \\ + c \end{multline}
\begin{eqnarray} y & = & x \\ & = & z \end{eqnarray}
\begin{alignat}{2} a &= b &\quad c &= d \end{alignat}`;
    expect(formulas(text, 'latex')).toEqual(['eq:a|cos(x) = (1 + -[{1 / 2} x^2] + {x^4 / 24} + ...)', '(7)|#e^x = (1 + x)', 'q|@f<0>(x) = (x + x^2)', '|a = b', '|c = d', '|(a + b + c)', '|y = x = z', '|a = b']);
  });

  it('hands on listings that name their language', () => {
    const text = '\\begin{lstlisting}[language=C]\nsin(x)/x\n\\end{lstlisting}\n\\begin{minted}{python}\nnp.sin(x)\n\\end{minted}';
    expect(summary(text, 'latex')).toEqual(['code lstlisting c: sin(x)/x', 'code minted python: np.sin(x)']);
  });

  it('survives half-typed text', () => {
    expect(summary('$x and no end\n\n$y$', 'latex')).toEqual(['inline latex: y']);
    expect(summary('$\\frac{1}{$ and $y$', 'latex')).toEqual(['inline latex: \\frac{1}{', 'inline latex: y']);
    expect(summary('\\begin{align} a \\\\ $b$', 'latex')).toEqual(['inline latex: b']);
  });

  it('scans 110 KB with 1800 regions in five times 50 ms at most', () => {
    const piece = String.raw`Some text with $\sin x$ and an aside % comment $no$
\begin{align} a &= b \\ c &= d \label{x} \end{align} more \(x^2\) text.
`;
    const text = piece.repeat(Math.ceil(110_000 / piece.length));
    const times = Array.from({ length: 20 }, () => {
      const begin = processorTime();
      expect(readDocument(text, 'latex').regions.length).toBeGreaterThan(1800);
      return processorTime() - begin;
    }).sort((a, b) => a - b);
    expect(times[9]).toBeLessThan(250);
  });

  it.each(['$', '$$', '\\[', '\\begin{equation}', '\\def\\x{', '%', '\\begin{', '{$'])('is linear on 100 000 characters of %s', (piece) => {
    const text = piece.repeat(Math.ceil(100_000 / piece.length));
    const begin = processorTime();
    readDocument(text, 'latex');
    expect(processorTime() - begin).toBeLessThan(3000);
  });
});

describe('Markdown documents', () => {
  it('reads mathematics and leaves money alone', () => {
    expect(summary('It costs $5 or $6. But $x^2$, $$y \\approx z$$ and $ not $ this.', 'markdown')).toEqual(['inline latex: x^2', 'display latex: y \\approx z']);
  });
  it('hands on fenced code with its language, also Quarto cells, and math fences', () => {
    expect(summary('```c\nsin(x)\n```\n\n```{python}\n#| echo: false\nx\n```\n\n```math\n\\cos x\n```\n', 'quarto')).toEqual(['code c: sin(x)', 'code python: #| echo: false\nx', 'display latex: \\cos x']);
  });
  it('reads past the marks of a quotation', () => {
    const text = '> $$\n> \\begin{aligned}\n> f(x) &= \\sin x \\\\\n> &= x + O(x^3) \\\\\n> g &= x\n> \\end{aligned}\n> $$\n';
    expect(formulas(text, 'markdown')).toEqual(['|@f<0>(x) = sin(x) = (x + O(x^3))', '|g = x']);
  });
  it('reads display blocks with environments and web delimiters', () => {
    expect(formulas('$$\n\\begin{align}\na &= b \\\\\n&= c\n\\end{align}\n$$\n\n\\\\[ e^x = 1 + x + \\cdots \\\\]\n', 'markdown')).toEqual(['|a = b = c', '|#e^x = (1 + x + ...)']);
  });
});

describe('comments', () => {
  it.each([
    ['c', 'a; // one\ns = "// no"; /* two\n three */ x', [' one', ' two\n three ']],
    ['rust', '/* a /* b */ c */ x // d', [' a /* b */ c ', ' d']],
    ['python', 's = "# no" # yes\nt = """\n# in a string\n"""', [' yes']],
    ['python', 'def f():\n    r"""What # it does."""\n    return "# no"', ['What # it does.']],
    ['python', "class A:\n    'In one line.'\n    x = {\n    'not one'\n    }", ['In one line.']],
    ['julia', '"""\n  f(x)\n"""\nf(x) = "# no"', ['\n  f(x)\n']],
    ['fortran', "s = 'it''s ! no' ! yes", [' yes']],
    ['matlab', "y = x'; % one\n%{\nblock\n%}", [' one', '\nblock\n']],
    ['julia', 'x #= a =# y # b', [' a ', ' b']],
    ['latex', '50\\% $x$ % note', [' note']],
    ['typescript', '/// doc\n`// no`', [' doc']],
  ] as const)('%s', (language, text, expected) => {
    expect(findComments(text, languageOf(language)).map((c) => text.slice(c.contentStart, c.contentEnd))).toEqual(expected);
  });
});

describe('languageOf', () => {
  it.each([
    ['tex', undefined, 'latex'],
    ['quarto', undefined, 'markdown'],
    ['cuda-cpp', undefined, 'cpp'],
    ['javascriptreact', undefined, 'javascriptreact'],
    ['FortranFreeForm', undefined, 'fortran'],
    ['plaintext', 'model.f90', 'fortran'],
    ['something-new', 'a.tex', 'latex'],
    ['something-new', undefined, 'plain'],
    ['plaintext', undefined, 'plain'],
  ])('%s %s is %s', (id, file, expected) => {
    expect(languageOf(id, file).id).toBe(expected);
  });
});

describe('documentStyle', () => {
  const style = (text: string) => documentStyle(text, { macros: readDocument(text, 'latex').macros });
  it('finds the O of the document', () => {
    expect(style('$x + O(x^2)$ $y + O(y^2)$').order).toBe('O');
    expect(style('$x + \\mathcal{O}(x^2)$').order).toBe('\\mathcal{O}');
    expect([style('$x + \\order{x^2}$').order, style('$x + \\order{x^2}$').orderTakesGroup]).toEqual(['\\order', true]);
    const own = style('\\newcommand{\\bigoh}[1]{\\mathcal{O}\\left(#1\\right)} $x + \\bigoh{x^2} + \\bigoh{y}$');
    expect([own.order, own.orderTakesGroup]).toEqual(['\\bigoh', true]);
    expect(style('$\\sin x$').order).toBe('O');
  });
  it('counts habits', () => {
    const found = style('$\\ln x \\approx \\tfrac12 x - \\tfrac13 x$, $\\varepsilon \\approx 1$, $a + \\dots$');
    expect(found).toMatchObject({ remainder: 'approximation', fraction: '\\tfrac', logarithm: '\\ln', dots: '\\dots', epsilon: '\\varepsilon', coefficient: 'before' });
    expect(style('$\\log x = x - \\frac{x^2}{2} + \\frac{x^3}{6} + \\cdots$').coefficient).toBe('over');
    expect(style('$\\log x = x - \\frac{x^2}{2!} + \\frac{x^3}{3!} + \\cdots$')).toMatchObject({ logarithm: '\\log', dots: '\\cdots', factorials: true });
  });
});

/** Common practice in notes and wikis: text behind the opening sign, an equation number or running text behind the closing one. */
describe('Markdown displays that share lines with text', () => {
  it.each([
    ['$$\\sin x = x\n$$ (1)\n and $y$', ['display latex: \\sin x = x', 'inline latex: y']],
    ['$$\n\\sin x = x\n$$ (eq1)\n and $y$', ['display latex: \\sin x = x', 'inline latex: y']],
    ['Text\n$$a\n  - b$$\nmore $z$\n\n$$\nq\n$$', ['display latex: a\n  - b', 'inline latex: z', 'display latex: q']],
    ['costs $$5 and\n\nmore $$ x', []],
  ] as const)('%s', (text, expected) => {
    expect(summary(text, 'markdown')).toEqual(expected);
  });
});
