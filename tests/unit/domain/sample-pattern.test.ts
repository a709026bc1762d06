import { describe, expect, it } from 'vitest';
import {
  dilutionIn,
  injectionIn,
  parsePattern,
  patternFault,
  splitLabel,
  usualPatterns,
  withPartsLacking
} from '../../../src/lib/domain/sample-pattern';

const split = (label: string, pattern: string): unknown => splitLabel(label, parsePattern(pattern) ?? []);

describe('a pattern for sample names', () => {
  it.each<[string, RegExp]>([
    ['{fraction}', /needs \{sample\}/],
    ['{sample}_{colour}', /\{colour\} is no part/],
    ['{sample}_{sample}', /stands in the pattern twice/],
    ['{sample}{fraction}', /something between them/],
    ['{sample}_{fraction', /opened or closed/],
    ['', /needs \{sample\}/]
  ])('%j is refused with a sentence', (pattern, words) => {
    expect(patternFault(pattern)).toMatch(words);
    expect(parsePattern(pattern)).toBeNull();
  });

  it('takes a label apart in every way that it can be followed', () => {
    expect(split('S1_Elution 1_2', '{sample}_{fraction}_{injection}')).toEqual([
      { sample: 'S1', fraction: 'Elution 1', injection: '2' }
    ]);
    expect(split('P_1_E', '{sample}_{fraction}')).toEqual([
      { sample: 'P', fraction: '1_E' },
      { sample: 'P_1', fraction: 'E' }
    ]);
    expect(split('2026-03-04 S1', '{any} {sample}')).toEqual([{ sample: 'S1' }]);
    expect(split('S1 INJ2', '{sample} inj{injection}')).toEqual([{ sample: 'S1', injection: '2' }]);
  });

  it('does not follow what does not fit: other marks, letters for numbers, empty parts', () => {
    expect(split('S1-E', '{sample}_{fraction}')).toEqual([]);
    expect(split('S1_two', '{sample}_{injection}')).toEqual([]);
    expect(split('_E', '{sample}_{fraction}')).toEqual([]);
    expect(split(`${'S_'.repeat(150)}1`, '{sample}_{fraction}')).toEqual([]);
  });

  it('lets parts be lacking, each with the text beside it, those with least lacking first', () => {
    const tokens = parsePattern('{sample}_{fraction}_{injection}') ?? [];
    const texts = withPartsLacking(tokens).map((group) =>
      group.map((pattern) =>
        pattern.map((token) => (token.kind === 'part' ? `{${token.part}}` : token.text)).join('')
      )
    );
    expect(texts).toEqual([
      ['{sample}_{fraction}_{injection}'],
      ['{sample}_{injection}', '{sample}_{fraction}'],
      ['{sample}']
    ]);
    const reversed = withPartsLacking(parsePattern('{fraction} {sample}') ?? []);
    expect(reversed[1]).toEqual([[{ kind: 'part', part: 'sample' }]]);
  });

  it('reads injections and dilutions as numbers and nothing else', () => {
    expect(['1', '02', '0', '1.5', '40000', 'x'].map(injectionIn)).toEqual([1, 2, null, null, null, null]);
    expect(['10', '2,5', '0.5', '1e3', '-2'].map(dilutionIn)).toEqual([10, 2.5, null, null, null]);
  });

  it('offers only patterns that can be followed, and none that takes a bare number for a dilution', () => {
    expect(usualPatterns.filter((pattern) => patternFault(pattern) !== null)).toEqual([]);
    expect(usualPatterns.filter((pattern) => /[_ /|.-]\{dilution\}(?!x)/.test(pattern))).toEqual([]);
    expect(new Set(usualPatterns).size).toBe(usualPatterns.length);
  });
});
