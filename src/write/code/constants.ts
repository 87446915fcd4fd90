/** Named constants to 50 digits, for literals in code: exact enough for every float format here. Sections of DLMF (from memory): 3.12 (pi), 4.2 (e), 5.2 (Euler), 25.11 (Catalan), 5.17 (Glaisher); the digits were recomputed. */
import { Q, type Rational } from '../../expression/index.ts';

const decimal = (text: string): Rational => {
  const value = Q.fromDecimal(text);
  if (!value) throw new RangeError('not a decimal');
  return value;
};

export const CONSTANT_VALUES = {
  pi: decimal('3.1415926535897932384626433832795028841971693993751'),
  e: decimal('2.7182818284590452353602874713526624977572470937'),
  eulerGamma: decimal('0.57721566490153286060651209008240243104215933593992'),
  catalan: decimal('0.91596559417721901505460351493238411077414937428167'),
  glaisher: decimal('1.282427129100622636875342568869791727767688927325'),
} as const;
