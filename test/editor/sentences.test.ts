/** The engine's sentences in another language: recognised as they stand in its source, with what is filled in. */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { filled, recogniser } from '../../src/editor/sentences.ts';
import { engineSentences } from './engineSentences.ts';

const bundle = JSON.parse(readFileSync(new URL('../../l10n/bundle.l10n.de.json', import.meta.url), 'utf8')) as Readonly<Record<string, string>>;
const recognise = recogniser(Object.keys(bundle));

describe('sentences of the engine', () => {
  it('are found in its source', () => {
    const found = engineSentences();
    expect(found.size).toBeGreaterThan(500);
    expect(found).toContain('A vector cannot be divided by; write its length or a dot product.');
    expect(found).toContain('The function {0} needs an argument.');
  });
  it('have German each', () => expect([...engineSentences()].filter((sentence) => !bundle[sentence])).toEqual([]));
  it('are recognised with what is filled in', () => {
    expect(recognise('The number is printed as 620; 720 is right.')).toEqual({ sentence: 'The number is printed as {0}; {1} is right.', values: ['620', '720'] });
    expect(recognise('Holds: every printed term agrees with the expansion (taken as the Bessel function).')?.values).toEqual(['the Bessel function']);
    expect(recognise('Holds. The difference is smaller than stated: it is of order the power 4 of x.')).toEqual({ sentence: 'Holds. {0}', values: ['The difference is smaller than stated: it is of order the power 4 of x.'] });
    expect(recognise('The tolerance "-1" must be a positive number such as 1e-6.')?.values).toEqual(['-1']);
    expect(recognise('No such sentence.')).toBeNull();
  });
  it('are recognised where a piece is empty or holds the braces of a formula', () => {
    expect(recognise('The interval reaches beyond the radius of convergence; for more terms nothing is proved.')?.values).toEqual(['']);
    const letter = recognise('It is not plain whether f(...) is a function or a product; write \\operatorname{f}(...) or f \\cdot (...).');
    expect(letter?.values).toEqual(['f', 'f', 'f']);
    expect(filled(bundle[letter?.sentence ?? ''] ?? '', letter?.values ?? [])).toBe('Ob f(...) eine Funktion oder ein Produkt ist, ist nicht klar; schreiben Sie \\operatorname{f}(...) oder f \\cdot (...).');
  });
  it('are told apart, each from all others', () => {
    const mistaken = Object.keys(bundle).filter((sentence) => engineSentences().has(sentence) && recognise(sentence.replace(/\{(\d)\}/g, 'x$1'))?.sentence !== sentence);
    expect(mistaken).toEqual([]);
  });
});
