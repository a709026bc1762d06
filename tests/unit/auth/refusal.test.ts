import { describe, expect, it } from 'vitest';
import { refusalSentence } from '../../../src/lib/server/auth/refusal';

describe('a refusal', () => {
  it('says who may, and as whom one is signed in', () => {
    expect(refusalSentence('analyst', 'studies.edit')).toBe(
      'This takes a chemist or a lab manager. You are signed in as an analyst.'
    );
    expect(refusalSentence('reviewer', 'data.enter')).toBe(
      'This takes a chemist, an analyst or a lab manager. You are signed in as a reviewer.'
    );
    expect(refusalSentence('chemist', 'review.sign')).toBe(
      'This takes a reviewer. You are signed in as a chemist.'
    );
  });
});
