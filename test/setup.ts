/**
 * Set up before every unit test file, so that neither a busy machine nor chance decides a test.
 * What the engine takes for the time (its budgets) is a quarter of the processor time that the process of the tests has used, not the wall clock; tests about speed
 * use `processorTime`. Random cases come from one seed, others by LEADING_ORDER_SEED.
 */
import fc from 'fast-check';

fc.configureGlobal({ seed: Number(process.env.LEADING_ORDER_SEED ?? 20261201) });

const PATIENCE = 4;
/** The processor is asked at most once in this many milliseconds of the wall clock: asking costs a system call. */
const GRAIN_MS = 1;
const wall = performance.now.bind(performance);
let asked = -Infinity;
let used = 0;

/** Milliseconds of processor time that this process has used, in all its threads. */
export function processorTime(): number {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
}

performance.now = () => {
  const now = wall();
  if (now - asked >= GRAIN_MS) {
    asked = now;
    used = processorTime() / PATIENCE;
  }
  return used;
};
