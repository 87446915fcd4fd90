import type { FunctionDescription } from '../description.ts';
import { arithmetic } from './arithmetic.ts';
import { circular } from './circular.ts';
import { exponential } from './exponential.ts';
import { hyperbolic } from './hyperbolic.ts';
import { inverseCircular } from './inverseCircular.ts';

export const elementaryFunctions: readonly FunctionDescription[] = [...circular, ...inverseCircular, ...exponential, ...hyperbolic, ...arithmetic];
