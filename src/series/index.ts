/** The door of series/: multiseries over an asymptotic scale, arithmetic and analytic functions of them. */
export { alongDerivative, compose, hyperbolic, sineCosine, sumOfSeries } from './analytic.ts';
export { theta } from './derivation.ts';
export { compareExponents, signOfExponent, undecidedSign } from './exponent.ts';
export { divide, exponential, generalPower, isRealMulti, levels, logarithm, pi, power, reciprocal, requireOscillation, withExact } from './exponential.ts';
export { integrate } from './integration.ts';
export { type InverseFunction, inverse } from './inverse.ts';
export { compareMonomials, decideSign, eventualSign, type Growth, growth, isKnownZero, isZero, leading, type Monomial, monomialOf, nextTerm, nextTermOrOrder } from './leading.ts';
export { addElements, type Context, exactOf, isLiteralOne, isLiteralZero, isRational, type Lead, type Multi, multiplyElements, negateElement, type Notes, type Scale, type ScaleElement, Series, Stream, type Term, unnamed } from './multi.ts';
export { monomialSeries, multiplyMonomials, orderSeries, raiseMonomial, truncate, type Truncation, unitMonomial } from './monomials.ts';
export { plainText } from './plain.ts';
export { add, monomial, multiply, negate, scaleBy, shift, streamIn, subtract, sumOf } from './ring.ts';
export { createScale, insertFormal, logarithmOf } from './scale.ts';
export { compareEventually, type Parts, split } from './split.ts';
export { dropTerms, finiteStream, mapStream, prepend, takeTerms } from './stream.ts';
export { integralTail } from './tail.ts';
export { imaginaryPart, mapConstants, realPart } from './complex.ts';
export { isOscillating, oscillatingParts } from './oscillation.ts';
