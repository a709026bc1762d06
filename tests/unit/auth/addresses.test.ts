import { describe, expect, it } from 'vitest';
import { isLoopbackAddress, isLoopbackHost } from '../../../src/lib/server/auth/loopback';
import { linkOrigin } from '../../../src/lib/server/mail/link-origin';

describe('loopback', () => {
  it.each(['127.0.0.1', '127.8.9.10', '::1', '::ffff:127.0.0.1'])('is %s', (address) => {
    expect(isLoopbackAddress(address)).toBe(true);
  });

  it.each(['10.0.0.1', '::ffff:10.0.0.1', '127.0.0.1.elsewhere.test', '2001:db8::1', ''])(
    'is not %s',
    (address) => {
      expect(isLoopbackAddress(address)).toBe(false);
      expect(isLoopbackHost(address)).toBe(false);
    }
  );

  it('goes by the names localhost and [::1] too', () => {
    expect(isLoopbackHost('localhost')).toBe(true);
    expect(isLoopbackHost('[::1]')).toBe(true);
    expect(isLoopbackHost('localhost.elsewhere.test')).toBe(false);
  });
});

describe('the origin of links in messages', () => {
  const settings = { origin: null, host: '0.0.0.0', port: 4000 };

  it('is ORIGIN where that is set, whatever the request names', () => {
    const fixed = { ...settings, origin: 'https://notes.lab.test' };
    expect(linkOrigin(fixed, new URL('http://elsewhere.test/forgot-password'))).toBe(
      'https://notes.lab.test'
    );
  });

  it('is the address of the request on this machine', () => {
    expect(linkOrigin(settings, new URL('http://localhost:5173/x'))).toBe('http://localhost:5173');
    expect(linkOrigin(settings, new URL('http://127.0.0.1:3000/x'))).toBe('http://127.0.0.1:3000');
  });

  it('is never a foreign host that a request names', () => {
    expect(linkOrigin(settings, new URL('http://elsewhere.test/x'))).toBe('http://localhost:4000');
    expect(linkOrigin({ ...settings, host: '10.1.2.3' }, new URL('http://elsewhere.test/'))).toBe(
      'http://10.1.2.3:4000'
    );
    expect(linkOrigin({ ...settings, host: '::1' }, new URL('http://elsewhere.test/'))).toBe(
      'http://[::1]:4000'
    );
  });
});
