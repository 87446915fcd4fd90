/** Names of known functions as they stand in formulas -> id of the description in src/functions. */

const table = new Map<string, string>();
const add = (id: string, ...written: readonly string[]): void => {
  for (const name of [id, ...written]) table.set(name, id);
};
for (const id of 'sin cos tan cot sec csc sinh cosh tanh coth sech csch exp log1p expm1 erf erfc erfi sinc abs sign floor ceil min max hypot atan2 log10 log2 exp2'.split(' ')) add(id);
add('tan', 'tg');
add('cot', 'ctg', 'cotg');
add('csc', 'cosec');
add('sinh', 'sh');
add('cosh', 'ch');
add('tanh', 'th', 'tgh');
for (const f of ['sin', 'cos', 'tan', 'cot', 'sec', 'csc']) add(`a${f}`, `arc${f}`);
for (const f of ['sin', 'cos', 'tan', 'cot', 'sec', 'csc']) add(`a${f}h`, `ar${f}h`, `arc${f}h`, `Ar${f}h`, `arg${f}h`);
add('atan', 'arctg');
add('log', 'ln', 'Log', 'Ln');
add('log10', 'lg');
add('sign', 'sgn');

/** Id of the function written `name` (without backslash); null if it is not known. */
export const functionId = (name: string): string | null => table.get(name) ?? null;
