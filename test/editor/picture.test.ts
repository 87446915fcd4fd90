/** The hover picture: drawn from the typesetter's own fonts, complete in itself, wrapped and short enough for a hover. */
import { readFile } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { createPictureMaker } from '../../src/worker/desk/picture/index.ts';

const maker = createPictureMaker(async (name) => new Uint8Array(await readFile(new URL(`../../node_modules/katex/dist/fonts/${name}`, import.meta.url))));
const picture = (latex: string, width = 480) => maker.picture({ desk: 'picture', latex, ink: '#cccccc', width, size: 15 });
const LONG = `\\frac{1}{\\sqrt{1-v^2/c^2}} = ${Array.from({ length: 14 }, (_, i) => `\\frac{${2 * i + 1} v^{${2 * i}}}{${i + 2} c^{${2 * i}}}`).join(' + ')} + O\\left(v^{28}\\right)`;

describe('pictures', () => {
  it.each(['x - \\frac{x^3}{6} + \\mathcal{O}(x^5)', '\\sqrt{2\\pi}\\left(\\frac{n}{e}\\right)^{n}', '\\sum_{k=0}^{\\infty}\\frac{B_{2k}}{(2k)!}x^{2k}', '\\hbar\\omega/k_B T \\ll 1', '\\int_0^1 \\frac{\\sin x}{x}\\,dx'])('draws %s', async (latex) => {
    const { uri, width, height } = await picture(latex);
    const svg = decodeURIComponent((uri ?? '').replace('data:image/svg+xml,', ''));
    expect(svg).toMatch(/^<svg xmlns='http:\/\/www\.w3\.org\/2000\/svg' width='\d+' height='\d+'/);
    expect(svg).not.toMatch(/foreignObject|<script|<image|NaN|undefined|https?:\/\/(?!www\.w3\.org)/);
    expect(svg.match(/<use /g)?.length).toBeGreaterThan(3);
    expect(width).toBeGreaterThan(30);
    expect(height).toBeGreaterThan(15);
  });
  it('holds nothing that Markdown or a URI would stumble over', async () => expect((await picture('f(x) = "y"')).uri).toMatch(/^data:image\/svg\+xml,[\w%.~-]+$/));
  it('wraps at operators instead of growing wider', async () => {
    const [narrow, wide] = [await picture(LONG, 300), await picture(LONG, 3000)];
    expect(narrow.width).toBeLessThanOrEqual(330);
    expect(narrow.height).toBeGreaterThan(2 * wide.height);
  });
  it('stays under the length at which a hover is cut', async () => expect((await picture(LONG)).uri?.length).toBeLessThan(90_000));
  it('says none for what it cannot draw or read', async () => {
    expect((await picture('\\begin{matrix} a & b \\end{matrix}')).uri).toBeNull();
    expect((await picture('\\frac{1}{')).uri).toBeNull();
    expect((await picture(`x^{${'a'.repeat(60_000)}}`)).uri).toBeNull();
  });
});
