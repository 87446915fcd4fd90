/** Glyph outlines of a TrueType font as SVG path data, so that a picture needs no font to be installed or embedded. Format: OpenType 1.9, tables cmap (format 4), glyf, loca, hmtx. */

export interface Glyph {
  /** SVG path data in font units, y downwards; empty for a blank. */
  readonly path: string;
  /** Font units. */
  readonly advance: number;
}
export interface OutlineFont {
  readonly unitsPerEm: number;
  /** Null where the font has no such character. */
  glyph(codePoint: number): Glyph | null;
}

interface Point {
  readonly x: number;
  readonly y: number;
  readonly on: boolean;
}

export function readOutlines(bytes: Uint8Array): OutlineFont {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const tables = new Map<string, number>();
  const count = view.getUint16(4);
  for (let i = 0; i < count; i += 1) {
    const at = 12 + 16 * i;
    tables.set(String.fromCharCode(view.getUint8(at), view.getUint8(at + 1), view.getUint8(at + 2), view.getUint8(at + 3)), view.getUint32(at + 8));
  }
  const table = (name: string): number => {
    const at = tables.get(name);
    if (at === undefined) throw new Error(`the font has no ${name} table`);
    return at;
  };
  const head = table('head');
  const unitsPerEm = view.getUint16(head + 18);
  const longLoca = view.getInt16(head + 50) === 1;
  const [loca, glyf, hmtx] = [table('loca'), table('glyf'), table('hmtx')];
  const metrics = view.getUint16(table('hhea') + 34);
  const indexOf = characterMap(view, table('cmap'));

  const offset = (index: number): number => (longLoca ? view.getUint32(loca + 4 * index) : 2 * view.getUint16(loca + 2 * index));
  const contours = (index: number, depth: number): readonly (readonly Point[])[] => {
    const start = glyf + offset(index);
    if (depth > 4 || offset(index) === offset(index + 1)) return [];
    return view.getInt16(start) >= 0 ? simpleGlyph(view, start) : compositeGlyph(view, start, (part) => contours(part, depth + 1));
  };
  const cache = new Map<number, Glyph | null>();
  return {
    unitsPerEm,
    glyph: (codePoint) => {
      const known = cache.get(codePoint);
      if (known !== undefined) return known;
      const index = indexOf(codePoint);
      const glyph = index === 0 ? null : { path: contours(index, 0).map(pathOf).join(''), advance: view.getUint16(hmtx + 4 * Math.min(index, metrics - 1)) };
      cache.set(codePoint, glyph);
      return glyph;
    },
  };
}

/** Format 4: segments of consecutive characters. Returns 0 (the missing glyph) for what the font has not. */
function characterMap(view: DataView, cmap: number): (codePoint: number) => number {
  const count = view.getUint16(cmap + 2);
  for (let i = 0; i < count; i += 1) {
    const at = cmap + view.getUint32(cmap + 4 + 8 * i + 4);
    if (view.getUint16(at) !== 4) continue;
    const segments = view.getUint16(at + 6) / 2;
    const [ends, starts] = [at + 14, at + 16 + 2 * segments];
    const [deltas, ranges] = [starts + 2 * segments, starts + 4 * segments];
    return (codePoint) => {
      for (let s = 0; s < segments; s += 1) {
        if (codePoint > view.getUint16(ends + 2 * s)) continue;
        const start = view.getUint16(starts + 2 * s);
        if (codePoint < start) return 0;
        const delta = view.getUint16(deltas + 2 * s);
        const range = view.getUint16(ranges + 2 * s);
        if (range === 0) return (codePoint + delta) & 0xffff;
        const index = view.getUint16(ranges + 2 * s + range + 2 * (codePoint - start));
        return index === 0 ? 0 : (index + delta) & 0xffff;
      }
      return 0;
    };
  }
  throw new Error('the font has no character map of format 4');
}

function simpleGlyph(view: DataView, start: number): readonly (readonly Point[])[] {
  const contourCount = view.getInt16(start);
  const ends = Array.from({ length: contourCount }, (_, i) => view.getUint16(start + 10 + 2 * i));
  const total = (ends.at(-1) ?? -1) + 1;
  let at = start + 10 + 2 * contourCount;
  at += 2 + view.getUint16(at);
  const flags: number[] = [];
  while (flags.length < total) {
    const flag = view.getUint8(at++);
    const repeats = flag & 8 ? view.getUint8(at++) : 0;
    for (let i = 0; i <= repeats; i += 1) flags.push(flag);
  }
  const coordinates = (short: number, same: number): number[] => {
    let value = 0;
    return flags.map((flag) => {
      if (flag & short) value += flag & same ? view.getUint8(at++) : -view.getUint8(at++);
      else if (!(flag & same)) {
        value += view.getInt16(at);
        at += 2;
      }
      return value;
    });
  };
  const xs = coordinates(2, 16);
  const ys = coordinates(4, 32);
  const points = flags.map((flag, i): Point => ({ x: xs[i] ?? 0, y: ys[i] ?? 0, on: (flag & 1) === 1 }));
  return ends.map((end, i) => points.slice(i === 0 ? 0 : (ends[i - 1] ?? 0) + 1, end + 1));
}

function compositeGlyph(view: DataView, start: number, part: (index: number) => readonly (readonly Point[])[]): readonly (readonly Point[])[] {
  const result: (readonly Point[])[] = [];
  let at = start + 10;
  for (let more = true; more; ) {
    const flags = view.getUint16(at);
    const index = view.getUint16(at + 2);
    at += 4;
    const words = (flags & 1) === 1;
    const [dx, dy] = words ? [view.getInt16(at), view.getInt16(at + 2)] : [view.getInt8(at), view.getInt8(at + 1)];
    at += words ? 4 : 2;
    let [a, b, c, d] = [1, 0, 0, 1];
    const fraction = (): number => {
      const value = view.getInt16(at) / 16384;
      at += 2;
      return value;
    };
    if (flags & 8) a = d = fraction();
    else if (flags & 64) [a, d] = [fraction(), fraction()];
    else if (flags & 128) [a, b, c, d] = [fraction(), fraction(), fraction(), fraction()];
    for (const contour of part(index)) result.push(contour.map((p) => ({ x: a * p.x + c * p.y + dx, y: b * p.x + d * p.y + dy, on: p.on })));
    more = (flags & 32) !== 0;
  }
  return result;
}

/** Quadratic splines; between two points off the curve lies one on it, half way. */
function pathOf(contour: readonly Point[]): string {
  const first = contour[0];
  const last = contour.at(-1);
  if (!first || !last) return '';
  const middle = (p: Point, q: Point): Point => ({ x: (p.x + q.x) / 2, y: (p.y + q.y) / 2, on: true });
  const begin = first.on ? first : last.on ? last : middle(first, last);
  const number = (value: number): string => String(Math.round(value));
  const at = (p: Point): string => `${number(p.x)} ${number(-p.y)}`;
  let path = `M${at(begin)}`;
  let control: Point | null = null;
  for (const point of [...contour.slice(first.on ? 1 : 0), begin]) {
    if (point.on) {
      path += control ? `Q${at(control)} ${at(point)}` : `L${at(point)}`;
      control = null;
    } else {
      if (control) path += `Q${at(control)} ${at(middle(control, point))}`;
      control = point;
    }
  }
  return `${path}Z`;
}
