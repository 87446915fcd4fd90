/** Assumptions as the readers find them, as the field of coefficients takes them. */
import { type Assumption, build, type Expression, walk } from '../expression/index.ts';
import { failure, type Outcome, success } from '../outcome.ts';
import { readAssumption, type Property } from '../read/index.ts';

const against = (left: Expression, relation: '<' | '<=' | '>' | '>=' | '!='): Assumption => ({ kind: 'relation', left, relation, right: build.number(0) });

/** What a property of a quantity means as relations and domains. A domain speaks of one symbol; of anything else only the sign is kept. */
function meaning(subject: Expression, property: Property): readonly Assumption[] {
  const domain = (name: 'integer' | 'real' | 'complex' | 'operator'): readonly Assumption[] => (subject.kind === 'symbol' ? [{ kind: 'domain', symbol: subject.name, domain: name }] : []);
  switch (property) {
    case 'positive':
      return [against(subject, '>')];
    case 'negative':
      return [against(subject, '<')];
    case 'nonzero':
      return [against(subject, '!=')];
    case 'nonnegative':
      return [against(subject, '>=')];
    case 'nonpositive':
      return [against(subject, '<=')];
    case 'natural':
      return [...domain('integer'), against(subject, '>=')];
    case 'integer':
    case 'even':
    case 'odd':
      return domain('integer');
    case 'real':
    case 'rational':
    case 'noninteger':
      return domain('real');
    case 'operator':
      return subject.kind === 'symbol' || (subject.kind === 'vector' && subject.operation === 'symbol') ? [{ kind: 'domain', symbol: subject.name ?? '', domain: 'operator' }] : [];
    case 'complex':
      return domain('complex');
  }
}

const isCommutator = (e: Expression): boolean => e.kind === 'vector' && /commutator$/.test(e.operation);

export function readAllAssumptions(texts: readonly string[] | undefined): Outcome<readonly Assumption[]> {
  const all: Assumption[] = [];
  for (const text of texts ?? []) {
    const read = readAssumption(text);
    if (!read.ok) return failure('bad-request', `The assumption "${text}" cannot be read: ${read.error.message}`);
    for (const a of read.value) {
      if (a.kind === 'property') all.push(...meaning(a.subject, a.property));
      else if (isCommutator(a.left) || isCommutator(a.right)) {
        const zero = a.relation === '!=' && a.right.kind === 'number';
        if (!zero) return failure('bad-request', `The commutation relation "${text}" is not used in expansions; say only that the letters do not commute.`);
        all.push(...[...walk(a.left)].flatMap((e) => meaning(e, 'operator')));
      } else all.push(a);
    }
  }
  return success(all);
}
