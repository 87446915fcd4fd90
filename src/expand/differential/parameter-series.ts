/** Power series in a small parameter, read coefficient after coefficient. */
import type { Element } from '../../algebra/types.ts';
import { Q } from '../../expression/index.ts';
import { Declined } from '../../outcome.ts';
import { type Context, isRational, type Multi, Series } from '../../series/index.ts';

/** The coefficient of the k-th power of the parameter as a function of k, in the given shape; `value` is asked once. Declines ("no-expansion") other powers than whole ones from 0 on. */
export function coefficientReader<T>(c: Context, value: () => Multi, shape: (e: Element) => T): (k: number) => T {
  let found: Multi | null = null;
  let index = 0;
  const known = new Map<number, Element>();
  return (k) => {
    found ??= value();
    if (!(found instanceof Series)) return shape(k === 0 ? found : Q.ZERO);
    if (found.element.kind !== 'local') throw irregular();
    for (;;) {
      const done = known.get(k);
      if (done !== undefined) return shape(done);
      const term = found.stream.at(index);
      if (!term) return shape(Q.ZERO);
      if (term.coefficient instanceof Series || !isRational(term.exponent) || term.exponent.den !== 1n || term.order) throw irregular();
      const power = Number(term.exponent.num);
      if (power < 0) throw irregular();
      if (power > k) return shape(Q.ZERO);
      known.set(power, term.coefficient);
      index += 1;
    }
  };
}

const irregular = (): Declined => new Declined('no-expansion', 'The problem is no power series in the small parameter with whole powers; choose another parameter.');
