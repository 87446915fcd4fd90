/** A small fixed part of the random run (violations.ts): no sample above its bound, no lower bound above the samples; and every function of the registry occurs in that run. */
import { expect, test } from 'vitest';
import type { Expression } from '../../src/expression/index.ts';
import { allFunctions } from '../../src/functions/index.ts';
import { generator } from '../rigorous/random.ts';
import { WITHOUT_BOUND } from './families.ts';
import { families, inner, judge, randomSetting } from './sampling.ts';

const CASES = 40;
const MILLISECONDS = 1500;

function idsOf(e: Expression): readonly string[] {
  switch (e.kind) {
    case 'call':
      return [e.function, ...e.args.flatMap(idsOf)];
    case 'sum':
      return e.terms.flatMap(idsOf);
    case 'product':
      return e.factors.flatMap(idsOf);
    case 'quotient':
      return [...idsOf(e.numerator), ...idsOf(e.denominator)];
    case 'power':
      return [...idsOf(e.base), ...idsOf(e.exponent)];
    case 'negation':
      return idsOf(e.operand);
    case 'root':
      return idsOf(e.radicand);
    default:
      return [];
  }
}

test('every function of the registry occurs', () => {
  const random = generator(1);
  const seen = new Set([...inner, ...families.flatMap((family) => Array.from({ length: 16 }, () => family.make(random)).flatMap(idsOf))]);
  const missing = allFunctions().map((d) => d.id).filter((id) => !seen.has(id) && !WITHOUT_BOUND.includes(id));
  expect(missing).toEqual([]);
  // Nothing is left aside that is tried.
  expect(WITHOUT_BOUND.filter((id) => seen.has(id))).toEqual([]);
});

test(`${CASES} random bounds hold at 50 samples each`, () => {
  let held = 0;
  for (let seed = 1; seed <= CASES; seed += 1) {
    const random = generator(seed);
    // The first numbers of neighbouring seeds are alike.
    for (let k = 0; k < 8; k += 1) random();
    const trial = judge(randomSetting(random), random, MILLISECONDS);
    if (trial.outcome === 'violated') throw new Error(`seed ${seed}: ${trial.text}`);
    if (trial.outcome === 'held') {
      held += 1;
      if (Number.isFinite(trial.lowerRatio)) expect(trial.lowerRatio, trial.text).toBeLessThan(1.001);
    }
  }
  expect(held).toBeGreaterThan(CASES / 3);
});
