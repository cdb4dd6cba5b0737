import { once } from 'node:events';
import { request, type IncomingMessage } from 'node:http';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { ErrorAnswer } from '@shared/schemas/errors';
import { MAX_BODY_BYTES, MAX_SYNC_BYTES } from '@shared/schemas/limits';
import { startServer, type TestServer } from '../support/startServer';
import { createApiClient, type ApiClient, type Reply } from './helpers/apiClient';
import { databaseDigest } from './helpers/databaseDigest';
import { createSchool, joinStudent, type School } from './helpers/people';
import { batch, rawRun, runItem } from './helpers/runs';

let server: TestServer;
let school: School;
beforeAll(async () => {
  server = await startServer();
  school = await createSchool(server);
});
afterAll(() => server.stop());
const errorOf = (reply: Reply) => [reply.status, ErrorAnswer.parse(reply.body).error.code];

describe('R6 what is not a whole sync request is answered as one JSON error and stores nothing', () => {
  const whole = JSON.stringify(batch([runItem()]));
  test.each([
    ['JSON cut off in the middle', { rawBody: whole.slice(0, whole.length / 2) }, [400, 'not_json']],
    ['text that is no JSON', { rawBody: 'hello' }, [400, 'not_json']],
    ['a single number', { rawBody: '42' }, [400, 'not_json']],
    ['an empty body', { rawBody: '' }, [400, 'bad_input']],
    ['another content type', { rawBody: whole, headers: { 'Content-Type': 'text/plain' } }, [415, 'json_only']],
    [
      'a form',
      { rawBody: 'a=1', headers: { 'Content-Type': 'application/x-www-form-urlencoded' } },
      [415, 'json_only'],
    ],
    [
      'an unknown character set',
      { rawBody: whole, headers: { 'Content-Type': 'application/json; charset=koi-8' } },
      [415, 'json_only'],
    ],
    ['an unknown compression', { rawBody: whole, headers: { 'Content-Encoding': 'lzma' } }, [415, 'json_only']],
    ['an unknown field', { rawBody: whole.replace('{', '{"extra":1,') }, [400, 'bad_input']],
    [
      'an unknown field in an item',
      { rawBody: whole.replace('"type":"run"', '"type":"run","x":1') },
      [400, 'bad_input'],
    ],
    ['another protocol', { rawBody: whole.replace('"protocol":1', '"protocol":2') }, [400, 'bad_input']],
    ['a polluted prototype', { rawBody: whole.replace('{', '{"__proto__":{"a":1},') }, [400, 'bad_input']],
    ['an array', { rawBody: '[]' }, [400, 'bad_input']],
  ])('%s', async (_what, options, expected) => {
    const before = await databaseDigest(server);
    const reply = await school.student.post('/api/sync', undefined, options);
    expect(errorOf(reply)).toEqual(expected);
    expect(reply.headers.get('Cache-Control')).toBe('no-store');
    expect(await databaseDigest(server)).toBe(before);
  });

  test('fifty-one items are one too many, and the message says how many fit', async () => {
    const reply = await school.student.post('/api/sync', batch(Array.from({ length: 51 }, () => runItem())));
    expect(reply.body.error.fields).toEqual([{ path: 'items', message: 'at most 50 items' }]);
  });

  test('an unknown field is named by its path', async () => {
    const reply = await school.student.post('/api/sync', batch([{ ...runItem(), owner_id: 'x' }]));
    expect(reply.body.error.fields).toEqual([{ path: 'items.0.owner_id', message: 'not known here' }]);
  });
});

describe('limits', () => {
  test('sync takes a body up to its own limit and answers 413 over it', async () => {
    const note = 'n'.repeat(450);
    const items = Array.from({ length: 50 }, () => runItem(rawRun({ note })));
    const padded = (bytes: number) => {
      const text = JSON.stringify(batch(items));
      return text.replace('{', `{${' '.repeat(bytes - Buffer.byteLength(text))}`);
    };
    const fits = await school.student.post('/api/sync', undefined, { rawBody: padded(MAX_SYNC_BYTES) });
    expect(fits.status).toBe(200);
    const over = await school.student.post('/api/sync', undefined, { rawBody: padded(MAX_SYNC_BYTES + 1) });
    expect(errorOf(over)).toEqual([413, 'too_large']);
    expect(over.body.error.message).toContain(String(MAX_SYNC_BYTES));
  });
  test('every other route has the small limit, and a smaller one for nobody', async () => {
    const post = (client: ApiClient, bytes: number) => client.post('/api/sign-in', { email: 'x'.repeat(bytes) });
    expect(errorOf(await post(school.student, MAX_BODY_BYTES))).toEqual([413, 'too_large']);
    expect(errorOf(await post(school.student, 8_000))).toEqual([400, 'bad_input']);
    expect(errorOf(await post(createApiClient(server.url), 8_000))).toEqual([413, 'too_large']);
  });
  test('nothing of a body is read for somebody who may not send it', async () => {
    const rawBody = '{"half": '.repeat(100_000);
    expect(errorOf(await createApiClient(server.url).post('/api/sync', undefined, { rawBody }))).toEqual([
      401,
      'not_signed_in',
    ]);
    expect(errorOf(await school.student.post('/api/classes', undefined, { rawBody }))).toEqual([403, 'not_allowed']);
  });
  test('a sign-in that ends while the body is on its way counts no more', async () => {
    const client = createApiClient(server.url);
    client.cookie = (await joinStudent(server, school.ownClass.code, 9, 'Slow')).cookie;
    const item = runItem();
    const text = JSON.stringify(batch([item]));
    const sending = request(`${server.url}/api/sync`, {
      method: 'POST',
      headers: {
        'X-Swaymark': '1',
        'Content-Type': 'application/json',
        'Content-Length': Buffer.byteLength(text),
        Cookie: client.cookie,
      },
    });
    const answered = once(sending, 'response') as Promise<[IncomingMessage]>;
    sending.write(text.slice(0, 100));
    await new Promise((resolve) => setTimeout(resolve, 200));
    await client.post('/api/sign-out');
    sending.end(text.slice(100));
    const [answer] = await answered;
    answer.resume();
    expect(answer.statusCode).toBe(401);
    expect(await server.running.deps.database.models.Run.count({ where: { id: item.id } })).toBe(0);
  });
  test('what is wrong is told in twenty fields at most, each path cut short', async () => {
    const manyKeys = Object.fromEntries(Array.from({ length: 5_000 }, (_, i) => [`key${i}`, 1]));
    const manyItems = batch(Array.from({ length: 50 }, () => ({ type: 'run' })));
    for (const body of [{ ...batch([]), ...manyKeys }, manyItems, { ...batch([]), ['k'.repeat(500_000)]: 1 }]) {
      const reply = await school.student.post('/api/sync', body);
      expect(reply.body.error.fields.length).toBeLessThanOrEqual(20);
      expect(reply.text.length).toBeLessThan(10_000);
    }
  });
});

describe('what another site could send is refused', () => {
  const signOut = (headers: Record<string, string>, rawBody?: string) =>
    createApiClient(server.url).post('/api/sign-out', undefined, { headers, rawBody });
  test.each([
    ['without the header of our pages', { 'X-Swaymark': '' }, 'header_missing'],
    ['from another site, by Sec-Fetch-Site', { 'Sec-Fetch-Site': 'cross-site' }, 'other_origin'],
    ['from another host of the same site', { 'Sec-Fetch-Site': 'same-site' }, 'other_origin'],
    ['from another site, by Origin', { Origin: 'https://example.org' }, 'other_origin'],
    ['from a page without an origin', { Origin: 'null' }, 'other_origin'],
  ])('%s', async (_what, headers, code) => {
    expect(errorOf(await signOut(headers))).toEqual([403, code]);
  });
  test('from our own pages it passes, by either header', async () => {
    expect((await signOut({ 'Sec-Fetch-Site': 'same-origin' })).status).toBe(200);
    expect((await signOut({ Origin: server.url })).status).toBe(200);
  });
  test('no answer allows another origin to read it', async () => {
    const reply = await createApiClient(server.url).get('/api/health', { headers: { Origin: 'https://example.org' } });
    expect(reply.headers.get('Access-Control-Allow-Origin')).toBeNull();
  });
});

describe('addresses', () => {
  test.each(['/api', '/api/', '/api/nothing', '/api/sync/x', '/api/../api/none'])(
    '%s answers 404 as JSON',
    async (path) => {
      expect(errorOf(await school.student.get(path))).toEqual([404, 'no_such_route']);
    },
  );
  test('a method that a route does not have answers 404 as JSON', async () => {
    expect(errorOf(await school.student.get('/api/sync'))).toEqual([404, 'no_such_route']);
    expect(errorOf(await school.student.delete('/api/me'))).toEqual([404, 'no_such_route']);
  });
  test('a path that cannot be decoded is told as that', async () => {
    expect(errorOf(await school.teacher.get('/api/classes/%E0%A4%A'))).toEqual([400, 'not_readable']);
  });
  test.each(['after=-1', 'after=1.5', 'after=x', 'after=1&after=2', 'limit=0', 'limit=201', 'other=1', 'after[a]=1'])(
    'GET /api/feed?%s is refused',
    async (query) => {
      expect(errorOf(await school.student.get(`/api/feed?${query}`))).toEqual([400, 'bad_input']);
    },
  );
});

test('an error nobody foresaw is answered blandly and leaves the server running', async () => {
  const other = await startServer();
  const { student } = await createSchool(other);
  await other.running.deps.database.sequelize.query('DROP TABLE run_deliveries');
  const reply = await student.post('/api/sync', batch([runItem()]));
  expect(errorOf(reply)).toEqual([500, 'server_error']);
  expect(reply.text).not.toMatch(/SQLITE|run_deliveries|node_modules/);
  expect(await other.running.deps.database.models.Run.count()).toBe(0);
  expect((await student.get('/api/health')).status).toBe(200);
  await other.stop();
});
