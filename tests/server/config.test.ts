import { expect, test } from 'vitest';
import { readConfig } from '../../server/config';

test('with nothing set the server listens on this machine alone, keeps its data under data/ and sends no mail', () => {
  const config = readConfig({});
  expect(config).toMatchObject({
    mode: 'production',
    port: 4180,
    host: '127.0.0.1',
    trustProxyHops: 0,
    isHttps: false,
  });
  expect(config.dataDir).toMatch(/\/data$/);
  expect(config.mail).toEqual({ kind: 'none' });
});

test('outside production mails go to the local sink, with SMTP_URL to that server', () => {
  expect(readConfig({ NODE_ENV: 'development' }).mail.kind).toBe('sink');
  expect(readConfig({ SMTP_URL: 'smtp://mail.example.org:587', MAIL_FROM: 'a@example.org' }).mail).toEqual({
    kind: 'smtp',
    url: 'smtp://mail.example.org:587',
    from: 'a@example.org',
  });
});

test('an empty variable counts as not set', () => {
  expect(readConfig({ PORT: '', PUBLIC_URL: '' })).toMatchObject({ port: 4180, publicUrl: null });
});

test.each([
  ['PORT', 'eighty', 'saw "eighty"'],
  ['PORT', '70000', 'saw "70000"'],
  ['PUBLIC_URL', 'swaymark.example.org', 'saw "swaymark.example.org"'],
  ['TRUST_PROXY', 'yes', 'saw "yes"'],
  ['LOG_LEVEL', 'loud', 'saw "loud"'],
  ['TLS_CERT_FILE', '/no/such/file', 'saw "/no/such/file"'],
  ['NODE_ENV', 'live', 'saw "live"'],
])('%s=%s is refused with what was seen', (name, text, seen) => {
  expect(() => readConfig({ [name]: text })).toThrow(`${name}: ${seen}`);
});

test.each([
  ['SESSION_SECRET', 'too short a secret'],
  ['SMTP_URL', 'user:secret@mail'],
])('%s is refused without repeating it', (name, text) => {
  expect(() => readConfig({ [name]: text })).toThrow(name);
  expect(() => readConfig({ [name]: text })).not.toThrow(text);
});

test('session secrets stand with commas between, the newest first, and each is long', () => {
  const [newer, older] = ['n'.repeat(32), 'o'.repeat(40)];
  expect(readConfig({ SESSION_SECRET: newer }).sessionSecrets).toEqual([newer]);
  expect(readConfig({ SESSION_SECRET: `${newer}, ${older}` }).sessionSecrets).toEqual([newer, older]);
  expect(readConfig({}).sessionSecrets).toBeNull();
  for (const SESSION_SECRET of [`${newer},short`, `${newer},`]) {
    expect(() => readConfig({ SESSION_SECRET })).toThrow('at least 32 characters');
  }
});

test('every mistake is named at once', () => {
  expect(() => readConfig({ PORT: 'x', LOG_LEVEL: 'y' })).toThrow(/PORT.*\n.*LOG_LEVEL/);
});

test('https without TLS files or a proxy in front is refused, because no sign-in could be kept', () => {
  const PUBLIC_URL = 'https://swaymark.example.org/';
  expect(() => readConfig({ PUBLIC_URL })).toThrow('TRUST_PROXY=1');
  expect(readConfig({ PUBLIC_URL, TRUST_PROXY: '1' })).toMatchObject({
    isHttps: true,
    publicUrl: 'https://swaymark.example.org',
  });
});

test('a certificate without its key is refused', () => {
  expect(() => readConfig({ TLS_CERT_FILE: 'package.json' })).toThrow('give both or neither');
});
