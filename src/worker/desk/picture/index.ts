/** A LaTeX formula as one SVG picture in a data URI: glyphs as outlines, lines broken at relations and operators, nothing to load, nothing to install. */
import type { PictureAnswer, PictureRequest } from '../types.ts';
import { type Box, type Laid, layOut, type Mark } from './layout.ts';
import { type OutlineFont, readOutlines } from './outlines.ts';

/** Past this a Markdown string would be cut in the middle of the picture. */
const LONGEST_URI = 90_000;
/** Longer formulas would not fit anyway, and typesetting them would cost seconds. */
const LONGEST_LATEX = 6000;
const CONTINUATION_INDENT = 1.5;
const LINE_GAP = 0.45;
const MARGIN = 0.15;
const CACHE_SIZE = 200;

export interface PictureMaker {
  picture(request: PictureRequest): Promise<PictureAnswer>;
}
const NONE: PictureAnswer = { uri: null, width: 0, height: 0 };

export function createPictureMaker(loadFile: (name: string) => Promise<Uint8Array>): PictureMaker {
  const fonts = new Map<string, OutlineFont>();
  const cache = new Map<string, PictureAnswer>();
  return {
    picture: async (request) => {
      const key = JSON.stringify([request.latex, request.ink, request.width, request.size]);
      const known = cache.get(key);
      if (known) return known;
      const made = request.latex.length > LONGEST_LATEX ? NONE : await make(request, fonts, loadFile).catch(() => NONE);
      if (cache.size >= CACHE_SIZE) cache.delete(cache.keys().next().value ?? '');
      cache.set(key, made);
      return made;
    },
  };
}

interface Line {
  readonly pieces: { readonly laid: Laid; readonly x: number }[];
  width: number;
  height: number;
  depth: number;
}

async function make(request: PictureRequest, fonts: Map<string, OutlineFont>, loadFile: (name: string) => Promise<Uint8Array>): Promise<PictureAnswer> {
  const bases = basesOf(request.latex, await typesetter());
  for (const face of facesOf(bases)) if (!fonts.has(face)) fonts.set(face, readOutlines(await loadFile(`KaTeX_${face}.ttf`)));
  const measure = (face: string, codePoint: number): number | null => {
    const font = fonts.get(face);
    const glyph = font?.glyph(codePoint);
    return font && glyph ? glyph.advance / font.unitsPerEm : null;
  };
  const em = request.size;
  const lines: Line[] = [];
  for (const base of bases) {
    const laid = layOut(base, measure);
    if (!laid) return NONE;
    let line = lines.at(-1);
    if (!line || (line.width + laid.width) * em > request.width) {
      line = { pieces: [], width: lines.length === 0 ? 0 : CONTINUATION_INDENT, height: 0.7, depth: 0.2 };
      lines.push(line);
    }
    line.pieces.push({ laid, x: line.width });
    line.width += laid.width;
    line.height = Math.max(line.height, base.height ?? 0);
    line.depth = Math.max(line.depth, base.depth ?? 0);
  }
  const width = Math.max(...lines.map((line) => line.width), 0.1) + 2 * MARGIN;
  const body: string[] = [];
  const symbols = new Map<string, string>();
  let top = MARGIN;
  for (const line of lines) {
    const baseline = top + line.height;
    for (const { laid, x } of line.pieces) for (const mark of laid.marks) body.push(draw(mark, x + MARGIN, baseline, fonts, symbols));
    top = baseline + line.depth + LINE_GAP;
  }
  const height = top - LINE_GAP + MARGIN;
  const [w, h] = [Math.ceil(width * em), Math.ceil(height * em)];
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${w}" height="${h}" viewBox="0 0 ${round(w / em)} ${round(h / em)}" fill="${request.ink}" color="${request.ink}"><defs>${[...symbols.values()].join('')}</defs>${body.join('')}</svg>`;
  const uri = `data:image/svg+xml,${escapeForUri(svg)}`;
  return uri.length > LONGEST_URI ? NONE : { uri, width: w, height: h };
}

type TreeBuilder = (latex: string, options: object) => Box;
/** Set up at the first picture. The tree builder is exported under a name that marks it internal; the shape used here is checked by the tests. */
async function typesetter(): Promise<TreeBuilder> {
  const { default: katex } = await import('katex');
  return (katex as unknown as { readonly __renderToHTMLTree: TreeBuilder }).__renderToHTMLTree;
}

/** The unbreakable pieces of a formula, in order. Throws where the typesetter cannot read it. */
function basesOf(latex: string, build: TreeBuilder): readonly Box[] {
  const tree = build(latex, { displayMode: true, throwOnError: true, strict: 'ignore', trust: false, maxExpand: 500 });
  const found: Box[] = [];
  const walk = (box: Box): void => {
    if (box.classes?.includes('base')) found.push(box);
    else for (const child of box.children ?? []) walk(child);
  };
  walk(tree);
  return found;
}

const FACE_CLASSES: readonly (readonly [RegExp, string])[] = [
  [/^mathnormal$/, 'Math-Italic'],
  [/^(mathit|textit)$/, 'Main-Italic'],
  [/^(mathbf|textbf)$/, 'Main-Bold'],
  [/^boldsymbol$/, 'Math-BoldItalic'],
  [/^(amsrm|mathbb)$/, 'AMS-Regular'],
  [/^mathcal$/, 'Caligraphic-Regular'],
  [/^mathfrak$/, 'Fraktur-Regular'],
  [/^(mathtt|texttt)$/, 'Typewriter-Regular'],
  [/^mathscr$/, 'Script-Regular'],
  [/^(mathsf|textsf)$/, 'SansSerif-Regular'],
  [/^(size1|small-op|delim-size1)$/, 'Size1-Regular'],
  [/^(size2|large-op)$/, 'Size2-Regular'],
  [/^size3$/, 'Size3-Regular'],
  [/^(size4|delim-size4)$/, 'Size4-Regular'],
];

function facesOf(boxes: readonly Box[]): ReadonlySet<string> {
  const faces = new Set(['Main-Regular']);
  const walk = (box: Box): void => {
    for (const name of box.classes ?? []) for (const [pattern, face] of FACE_CLASSES) if (pattern.test(name)) faces.add(face);
    for (const child of box.children ?? []) walk(child);
  };
  boxes.forEach(walk);
  return faces;
}

const round = (value: number): string => String(Math.round(value * 1000) / 1000);

function draw(mark: Mark, dx: number, dy: number, fonts: ReadonlyMap<string, OutlineFont>, symbols: Map<string, string>): string {
  const [x, y] = [round(mark.x + dx), round(mark.y + dy)];
  if (mark.kind === 'rule') return `<rect x="${x}" y="${y}" width="${round(mark.width)}" height="${round(mark.height)}"/>`;
  if (mark.kind === 'sign') {
    // The sign is 400 em long and shows only as much as its window lets through.
    const sign = mark.markup.replace(/^<svg[^>]*?viewBox=(['"])([^'"]*)\1[^>]*>/, (_whole, _quote, box: string) => `<svg x="${x}" y="${y}" width="${round(mark.width)}" height="${round(mark.height)}" viewBox="${box}" preserveAspectRatio="xMinYMin slice">`);
    return sign;
  }
  const font = fonts.get(mark.face);
  const glyph = font?.glyph(mark.codePoint);
  if (!font || !glyph || glyph.path === '') return '';
  const key = `${mark.face}/${mark.codePoint}`;
  const id = `g${[...symbols.keys()].indexOf(key) >= 0 ? [...symbols.keys()].indexOf(key) : symbols.size}`;
  if (!symbols.has(key)) symbols.set(key, `<path id="${id}" d="${glyph.path}"/>`);
  return `<use href="#${id}" transform="translate(${x} ${y}) scale(${Number((mark.size / font.unitsPerEm).toFixed(7))})"/>`;
}

/** Percent-encoding of what a URI, Markdown or an attribute would stumble over; the rest stays readable and short. */
function escapeForUri(svg: string): string {
  return encodeURIComponent(svg.replaceAll('"', "'")).replace(/[!'()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);
}
