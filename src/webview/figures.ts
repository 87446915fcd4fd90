/** Decimals as shown: few digits, and still true after shortening. */

/**
 * A positive decimal (`0.00006764483`, `5.427808e-12`) with at most `digits` significant digits, rounded up (`above`) or down (`below`),
 * in scientific notation where it is small or large. Anything else is returned as it is.
 */
export function shortened(decimal: string, side: 'above' | 'below', digits = 4): string {
  const match = /^(\d*)\.?(\d*)(?:[eE]([-+]?\d+))?$/.exec(decimal.trim());
  if (!match || !/\d/.test(decimal)) return decimal;
  const [, whole = '', fraction = '', exponent = '0'] = match;
  const all = `${whole}${fraction}`;
  const lead = all.search(/[1-9]/);
  if (lead < 0) return '0';
  let power = whole.length - lead - 1 + Number(exponent);
  const significant = all.slice(lead);
  let kept = BigInt(significant.slice(0, digits).padEnd(digits, '0'));
  if (side === 'above' && /[1-9]/.test(significant.slice(digits))) kept += 1n;
  let text = String(kept);
  if (text.length > digits) {
    text = text.slice(0, digits);
    power += 1;
  }
  const trimmed = text.replace(/0+$/, '');
  if (power >= -3 && power < digits) return plain(trimmed, power);
  return `${trimmed[0] ?? ''}${trimmed.length > 1 ? `.${trimmed.slice(1)}` : ''}e${power}`;
}

function plain(significant: string, power: number): string {
  if (power < 0) return `0.${'0'.repeat(-power - 1)}${significant}`;
  const whole = significant.slice(0, power + 1).padEnd(power + 1, '0');
  const rest = significant.slice(power + 1);
  return rest === '' ? whole : `${whole}.${rest}`;
}

const CONSTANTS_SHOWN = 3;

/** `g = 9.81, l = 2*g`: the first few, then how many more. */
export function constantsText(constants: readonly { readonly name: string; readonly value: string }[]): string {
  const shown = constants.slice(0, CONSTANTS_SHOWN).map(({ name, value }) => `${name} = ${value}`);
  return `${shown.join(', ')}${constants.length > CONSTANTS_SHOWN ? ` (+${constants.length - CONSTANTS_SHOWN})` : ''}`;
}
