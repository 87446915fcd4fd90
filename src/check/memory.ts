/** Verdicts kept between checks, so that an edit re-judges only what it touches. */
import type { Span } from '../expression/index.ts';
import type { Finding } from '../protocol.ts';
import type { Formula, MacroTable } from '../read/index.ts';

/** Entries and characters kept at most per kind; the ones longest unused go first. */
const MOST_ENTRIES = 6000;
const MOST_CHARACTERS = 16_000_000;

/** Values with places in a text, by a key that holds everything they depend on. Bounded, least recently used out first. */
class Store<T> {
  private readonly entries = new Map<string, { readonly value: T; readonly start: number; readonly size: number }>();
  private characters = 0;
  private readonly moved: (value: T, by: number) => T;
  private readonly sizeOf: (value: T) => number;

  constructor(moved: (value: T, by: number) => T, sizeOf: (value: T) => number) {
    this.moved = moved;
    this.sizeOf = sizeOf;
  }

  /** The value for the key, moved to where its text starts now. */
  recall(key: string, start: number): T | null {
    const entry = this.entries.get(key);
    if (!entry) return null;
    const value = entry.start === start ? entry.value : this.moved(entry.value, start - entry.start);
    this.entries.delete(key);
    this.entries.set(key, { value, start, size: entry.size });
    return value;
  }

  /** The value for the key as it was kept, and where its text started then. */
  recallStill(key: string): { readonly value: T; readonly start: number } | null {
    const entry = this.entries.get(key);
    if (!entry) return null;
    this.entries.delete(key);
    this.entries.set(key, entry);
    return entry;
  }

  keep(key: string, start: number, value: T): void {
    const old = this.entries.get(key);
    if (old) {
      this.entries.delete(key);
      this.characters -= old.size;
    }
    const size = key.length + this.sizeOf(value);
    if (size > MOST_CHARACTERS / 16) return;
    this.entries.set(key, { value, start, size });
    this.characters += size;
    for (const [oldest, entry] of this.entries) {
      if (this.entries.size <= MOST_ENTRIES && this.characters <= MOST_CHARACTERS) break;
      this.entries.delete(oldest);
      this.characters -= entry.size;
    }
  }
}

/** One engine's memory of verdicts and of formulas read. */
export class CheckMemory {
  readonly verdicts = new Store<readonly Finding[]>(movedFindings, (findings) => findings.reduce((sum, f) => sum + 100 + f.reason.length + f.found.length, 0));
  /** The size of a tree is taken as a multiple of its text, which is in the key already. */
  readonly formulas = new Store<Formula>(movedTree, (formula) => 20 * lengthOf(formula));
}

const lengthOf = ({ expression: { span } }: Formula): number => (span ? span.end - span.start : 100);

function movedFindings(findings: readonly Finding[], by: number): readonly Finding[] {
  return findings.map((f) => ({
    ...f,
    start: f.start + by,
    end: f.end + by,
    claim: { start: f.claim.start + by, end: f.claim.end + by },
    fix: f.fix && { ...f.fix, start: f.fix.start + by, end: f.fix.end + by },
  }));
}

/** Plain data with every `span` in it moved; exact numbers hold no places. */
export function movedTree<T>(value: T, by: number): T {
  if (Array.isArray(value)) return value.map((v: unknown) => movedTree(v, by)) as T;
  if (typeof value !== 'object' || value === null) return value;
  const out: Record<string, unknown> = {};
  for (const [name, part] of Object.entries(value)) {
    if (name === 'span' && isSpan(part)) out[name] = { start: part.start + by, end: part.end + by };
    else out[name] = typeof part === 'object' && part !== null && !('den' in part) ? movedTree(part as unknown, by) : part;
  }
  return out as T;
}
const isSpan = (v: unknown): v is Span => typeof v === 'object' && v !== null && 'start' in v && 'end' in v;

/** A text that is equal for equal expressions, places left out. */
export const signatureOf = (value: unknown): string => JSON.stringify(value, (name, v: unknown) => (name === 'span' ? undefined : typeof v === 'bigint' ? `${v}n` : v)) ?? '';

/** The macros that a text uses, with those that they use in turn. */
export function macrosUsed(text: string, macros: MacroTable): string {
  if (macros.size === 0) return '';
  const used = new Map<string, string>();
  const pending = [text];
  for (let piece = pending.pop(); piece !== undefined; piece = pending.pop()) {
    for (const [name, macro] of macros) {
      if (used.has(name) || !piece.includes(name)) continue;
      const body = signatureOf(macro);
      used.set(name, body);
      pending.push(body.replaceAll('\\\\', '\\'));
    }
  }
  return [...used].map(([name, body]) => `${name}:${body}`).sort().join('\n');
}
