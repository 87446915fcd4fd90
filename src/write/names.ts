/** How the writers find the name of a function: from its one description. A function that nobody described is written by its id. */
export { describe } from '../functions/index.ts';
