import { parse } from 'devalue';
import { describe, expect, it } from 'vitest';
import { isEnhancedForm, keepForm } from '../../../src/lib/server/hooks/kept-form';

const sent = (fields: Readonly<Record<string, string>>, headers: Record<string, string> = {}): Request =>
  new Request('http://localhost/studies/T-1/aim', {
    method: 'POST',
    headers,
    body: new URLSearchParams(fields)
  });

describe('a form that was sent after the session had ended', () => {
  it('is told apart from one that was sent without script', () => {
    expect(isEnhancedForm(sent({}, { 'x-sveltekit-action': 'true' }))).toBe(true);
    expect(isEnhancedForm(sent({}))).toBe(false);
    expect(
      isEnhancedForm(new Request('http://localhost/', { headers: { 'x-sveltekit-action': 'true' } }))
    ).toBe(false);
  });

  it('gets back what was typed, without passwords, as a failure that the page applies to itself', async () => {
    const response = await keepForm(sent({ title: 'River, second year', password: 'brown herons' }));
    const answer = (await response.json()) as { type: string; status: number; data: string };
    expect(answer).toMatchObject({ type: 'failure', status: 401 });
    const trouble = parse(answer.data) as { values: Record<string, string>; message: string };
    expect(trouble.values).toEqual({ title: 'River, second year' });
    expect(trouble.message).toContain('session has ended');
  });

  it('bears a body that is no form', async () => {
    const response = await keepForm(new Request('http://localhost/', { method: 'POST', body: '{' }));
    expect(await response.json()).toMatchObject({ type: 'failure', status: 401 });
  });
});
