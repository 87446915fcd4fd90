/**
 * The typesetter's box tree laid out as positioned glyphs, rules and stretched signs, in em of the base size, y downwards.
 * It understands the boxes that formulas of this tool are made of and refuses others (`null`): then the text stands alone.
 */

/** What is read of the typesetter's tree. Lengths in `style` are CSS lengths in em. */
export interface Box {
  readonly classes?: readonly string[];
  readonly children?: readonly Box[];
  readonly style?: Readonly<Record<string, string | undefined>>;
  readonly text?: string;
  readonly italic?: number;
  readonly height?: number;
  readonly depth?: number;
  /** A stretched sign: already SVG. */
  readonly attributes?: Readonly<Record<string, string>>;
  toMarkup?(): string;
}

export type Mark =
  | { readonly kind: 'glyph'; readonly face: string; readonly codePoint: number; readonly x: number; readonly y: number; readonly size: number }
  | { readonly kind: 'rule'; readonly x: number; readonly y: number; readonly width: number; readonly height: number }
  | { readonly kind: 'sign'; readonly markup: string; readonly x: number; readonly y: number; readonly width: number; readonly height: number };

export interface Laid {
  readonly marks: readonly Mark[];
  readonly width: number;
}
/** Width of a character in em, or null where the face has it not. */
export type Measure = (face: string, codePoint: number) => number | null;

/** Sizes 1 to 11 of the typesetter, relative to size 6. */
const SIZES = [0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.2, 1.44, 1.728, 2.074, 2.488];
/** A box of no ink that closes an absent delimiter. */
const NULL_DELIMITER = 0.12;
const IGNORED = new Set(['strut', 'vlist-s', 'pstrut', 'newline']);
const UNKNOWN = ['mtable', 'accent-full', 'cancel-lap', 'fbox', 'boxpad', 'eqn-num', 'x-arrow', 'stretchy', 'enclosing', 'textring'];

class Unsupported extends Error {}

interface Context {
  readonly size: number;
  readonly face: string;
  readonly centred: boolean;
  /** Set inside a built-up delimiter, whose pieces come from the face of one size. */
  readonly pieces: string | null;
}

export function layOut(box: Box, measure: Measure): Laid | null {
  const marks: Mark[] = [];
  try {
    const width = place(box, 0, 0, { size: 1, face: 'Main-Regular', centred: false, pieces: null }, measure, marks);
    return { marks, width };
  } catch (error) {
    if (error instanceof Unsupported) return null;
    throw error;
  }
}

const em = (length: string | undefined): number => (length === undefined ? 0 : Number.parseFloat(length) || 0);

function place(box: Box, x: number, y: number, outer: Context, measure: Measure, marks: Mark[]): number {
  const classes = box.classes ?? [];
  const has = (name: string): boolean => classes.includes(name);
  if (UNKNOWN.some(has)) throw new Unsupported();
  if (classes.some((name) => IGNORED.has(name))) return 0;
  const style = box.style ?? {};
  const context = contextOf(classes, outer);
  const { size } = context;
  if (has('nulldelimiter')) return NULL_DELIMITER * size;
  let at = x + (em(style['marginLeft']) + em(style['paddingLeft'])) * size;
  const shifted = style['position'] === 'relative' || has('delimcenter') || has('op-symbol') ? y + em(style['top']) * size : y;
  if (box.text !== undefined) {
    at = placeText(box, at, shifted, context, measure, marks);
  } else if (has('vlist-t')) {
    at += placeStack(box, at, shifted, context, measure, marks);
  } else if (has('rule')) {
    const [width, height] = [em(style['borderRightWidth']) * size, em(style['borderTopWidth']) * size];
    marks.push({ kind: 'rule', x: at, y: shifted - height - em(style['bottom']) * size, width, height });
    at += width;
  } else {
    for (const child of box.children ?? []) at += place(child, at, shifted, context, measure, marks);
  }
  return at + em(style['marginRight']) * size - x;
}

function placeText(box: Box, x: number, y: number, context: Context, measure: Measure, marks: Mark[]): number {
  let at = x;
  for (const character of box.text ?? '') {
    const codePoint = character.codePointAt(0) ?? 0;
    if (codePoint === 0x200b) continue;
    if (codePoint === 0xa0 || codePoint === 0x20) {
      at += 0.25 * context.size;
      continue;
    }
    const face = measure(context.face, codePoint) === null ? 'Main-Regular' : context.face;
    const width = measure(face, codePoint);
    if (width === null) throw new Unsupported();
    marks.push({ kind: 'glyph', face, codePoint, x: at, y, size: context.size });
    at += width * context.size;
  }
  return at + (box.italic ?? 0) * context.size;
}

/** A vertical list: rows whose baselines are `top` + the strut of the row below the list's own. Returns the width of the widest. */
function placeStack(box: Box, x: number, y: number, context: Context, measure: Measure, marks: Mark[]): number {
  const { size } = context;
  const rows = (box.children?.[0]?.children?.[0]?.children ?? []).map((row) => {
    const strut = row.children?.find((child) => child.classes?.includes('pstrut'));
    const own: Mark[] = [];
    const width = place({ ...row, style: { ...row.style, top: undefined } }, 0, 0, context, measure, own);
    return { row, own, width, baseline: y + (em(row.style?.['top']) + em(strut?.style?.['height'])) * size };
  });
  const widest = Math.max(0, ...rows.map((row) => row.width));
  for (const { row, own, width, baseline } of rows) {
    const line = row.children?.find((child) => child.classes?.some((name) => name.endsWith('-line')));
    const sign = row.children?.find((child) => child.classes?.includes('hide-tail'));
    if (line) {
      const thickness = em(line.style?.['borderBottomWidth']) * size;
      marks.push({ kind: 'rule', x, y: baseline - thickness, width: widest, height: thickness });
    } else if (sign) {
      const drawing = sign.children?.[0];
      if (!drawing?.toMarkup) throw new Unsupported();
      const height = em(sign.style?.['height']) * size;
      // Hanging from the strut's top: the sign's own height reaches down from there.
      marks.push({ kind: 'sign', markup: drawing.toMarkup(), x, y: baseline - (row.height ?? 0) * size, width: Math.max(widest, em(sign.style?.['minWidth']) * size), height });
    } else {
      const shift = x + (context.centred ? (widest - width) / 2 : 0);
      for (const mark of own) marks.push({ ...mark, x: mark.x + shift, y: mark.y + baseline });
    }
  }
  return widest;
}

const FACES: readonly (readonly [string, string])[] = [
  ['mathnormal', 'Math-Italic'],
  ['mathit', 'Main-Italic'],
  ['textit', 'Main-Italic'],
  ['mathbf', 'Main-Bold'],
  ['textbf', 'Main-Bold'],
  ['boldsymbol', 'Math-BoldItalic'],
  ['amsrm', 'AMS-Regular'],
  ['mathbb', 'AMS-Regular'],
  ['mathcal', 'Caligraphic-Regular'],
  ['mathfrak', 'Fraktur-Regular'],
  ['mathtt', 'Typewriter-Regular'],
  ['texttt', 'Typewriter-Regular'],
  ['mathscr', 'Script-Regular'],
  ['mathsf', 'SansSerif-Regular'],
  ['textsf', 'SansSerif-Regular'],
  ['mainrm', 'Main-Regular'],
  ['textrm', 'Main-Regular'],
  ['mathrm', 'Main-Regular'],
  ['small-op', 'Size1-Regular'],
  ['large-op', 'Size2-Regular'],
];

function contextOf(classes: readonly string[], outer: Context): Context {
  const has = (name: string): boolean => classes.includes(name);
  let { size, face, centred, pieces } = outer;
  if (has('sizing') || has('fontsize-ensurer')) {
    const from = sizeOf(classes, /^reset-size(\d+)$/);
    const to = sizeOf(classes, /^size(\d+)$/);
    if (from !== null && to !== null) size *= to / from;
  }
  if (has('delimsizing')) {
    const step = classes.map((name) => /^size([1-4])$/.exec(name)?.[1]).find((n) => n !== undefined);
    if (step) face = `Size${step}-Regular`;
  }
  if (has('delim-size1')) pieces = 'Size1-Regular';
  if (has('delim-size4')) pieces = 'Size4-Regular';
  if (pieces && classes.length === 0) face = pieces;
  for (const [name, use] of FACES) if (has(name)) face = use;
  if (has('mfrac') || has('op-limits') || has('accent')) centred = true;
  else if (has('mord') || has('minner') || has('msupsub') || has('sqrt')) centred = false;
  return { size, face, centred, pieces };
}

function sizeOf(classes: readonly string[], pattern: RegExp): number | null {
  for (const name of classes) {
    const index = pattern.exec(name)?.[1];
    if (index !== undefined) return SIZES[Number(index) - 1] ?? null;
  }
  return null;
}
