/** How names of vectors are written. */

/** Commands that set a letter bold or under an arrow. */
export const BOLD: ReadonlySet<string> = new Set('vec mathbf bm boldsymbol overrightarrow pmb mathbfit'.split(' '));

const VECTOR_NAME = new RegExp(`\\\\(?:${[...BOLD].join('|')})\\{`);
/** Whether a name is set bold or under an arrow: a function of that name has vectors as values. */
export const isVectorName = (name: string): boolean => VECTOR_NAME.test(name);

/** The letters A to Z, a to z, Greek ones and digits set bold. Source: Unicode code chart, Mathematical Alphanumeric Symbols. */
export const setBold = (text: string): string =>
  [...text]
    .map((sign) => {
      const code = sign.codePointAt(0) ?? 0;
      const block = BOLD_BLOCKS.find(({ from, to }) => code >= from && code <= to);
      return block ? String.fromCodePoint(block.bold + code - block.from) : sign;
    })
    .join('');
const BOLD_BLOCKS = [
  { from: 0x41, to: 0x5a, bold: 0x1d400 },
  { from: 0x61, to: 0x7a, bold: 0x1d41a },
  { from: 0x391, to: 0x3a9, bold: 0x1d6a8 },
  { from: 0x3b1, to: 0x3c9, bold: 0x1d6c2 },
  { from: 0x30, to: 0x39, bold: 0x1d7ce },
];
