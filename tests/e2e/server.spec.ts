import { expect, test } from '@playwright/test';

test('the server says that it lives and that it is ready', async ({ request }) => {
  expect(await (await request.get('/healthz')).json()).toEqual({ status: 'ok' });
  expect(await (await request.get('/readyz')).json()).toEqual({ status: 'ready' });
});

test('every answer carries an id of its own and the headers that tell browsers what never happens here', async ({
  request
}) => {
  const ids = new Set<string>();
  for (const path of ['/sign-in', '/healthz', '/no/such/page', '/api/v1/no-such-thing']) {
    const headers = (await request.get(path)).headers();
    expect(headers['x-content-type-options'], path).toBe('nosniff');
    expect(headers['x-frame-options'], path).toBe('DENY');
    expect(headers['content-security-policy'], path).toContain("frame-ancestors 'none'");
    expect(headers['content-security-policy'], path).not.toContain('unsafe-eval');
    ids.add(headers['x-request-id'] ?? '');
  }
  expect(ids.size).toBe(4);
});

test('a page is sent compressed to who accepts it', async ({ request }) => {
  const packed = await request.get('/sign-in', { headers: { 'accept-encoding': 'gzip' } });
  expect(packed.headers()['content-encoding']).toBe('gzip');
  expect(await packed.text()).toContain('</html>');
  const plain = await request.get('/sign-in', { headers: { 'accept-encoding': 'identity' } });
  expect(plain.headers()['content-encoding']).toBeUndefined();
});

test('an unknown address of the API answers as problem+json, whatever the program says it accepts', async ({
  request
}) => {
  for (const accept of ['*/*', 'text/html', 'application/json']) {
    const response = await request.get('/api/v1/no-such-thing', { headers: { accept } });
    expect(response.status()).toBe(404);
    expect(response.headers()['content-type']).toBe('application/problem+json');
    expect(await response.json()).toMatchObject({ status: 404, code: 'not-found' });
  }
});

test('a form that another site sends is refused', async ({ request }) => {
  const response = await request.post('/sign-in', {
    headers: { origin: 'https://elsewhere.example' },
    form: { email: 'someone@lab.example', password: 'x' }
  });
  expect(response.status()).toBe(403);
});

test('an unknown address shows a page with the way back', async ({ page }) => {
  const response = await page.goto('/no/such/page');
  expect(response?.status()).toBe(404);
  await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
  await expect(page.getByText('nothing at this address')).toBeVisible();
});
