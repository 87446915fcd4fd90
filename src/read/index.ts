/** Text -> expression, with source positions: LaTeX, Markdown, plain notation, code, notes. */
export { type Formula, readExpression, readFormula, type ReadOptions } from './math/read.ts';
export { collectMacros, type Macro, type MacroTable, NO_MACROS } from './math/macros.ts';
