/** How a mean and its RSD stand against the criteria. `too few` forms no judgement. */
export const verdicts = ['inside', 'watch', 'outside', 'too few'] as const;
export type Verdict = (typeof verdicts)[number];
