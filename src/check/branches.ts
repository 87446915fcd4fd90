/** Series branches of a program beside the direct form: `x < eps ? 1 - x*x/6 : sin(x)/x`. */
import type { Finding } from '../protocol.ts';
import type { SeriesBranch } from '../read/index.ts';
import type { Claim } from './claims.ts';
import { findingOf } from './findings.ts';
import type { Place } from './verdicts.ts';
import type { PolynomialReader } from './remarks.ts';
import type { Asked } from './setting.ts';

/** What reads the branches of a program; CodeReader fits once its grammar is loaded. */
export interface BranchReader extends PolynomialReader {
  readBranches(text: string, language: string): readonly SeriesBranch[];
}

export function branchFindings(text: string, branch: SeriesBranch, asked: Asked): readonly Finding[] {
  const claim: Claim = { function: branch.direct, name: null, side: branch.series, relation: 'about', span: branch.span, neighbour: null };
  const place: Place = {
    text,
    formula: { span: branch.span, notation: 'plain', formula: { expression: branch.series, conditions: branch.condition ? [branch.condition] : [], remarks: [] }, inline: false, label: null },
    around: { conditions: branch.condition && !branch.negated ? [branch.condition] : [], before: '', after: '' },
  };
  return findingOf(claim, branch.direct, asked, place).map((finding) => ({ ...finding, fix: codeFix(text, finding.fix) }));
}

/** A number is replaced by a number of the same form; a term is not rewritten, since its notation would not be the program's. */
function codeFix(text: string, fix: Finding['fix']): Finding['fix'] {
  if (!fix) return null;
  if (/^[-+]$/.test(fix.text)) return fix;
  if (!/^\d+$/.test(fix.text)) return null;
  const printed = /^\d+(\.\d*)?([a-zA-Z_]\w*)?$/.exec(text.slice(fix.start, fix.end));
  return printed ? { ...fix, text: `${fix.text}${printed[1] === undefined ? '' : '.0'}${printed[2] ?? ''}` } : null;
}
