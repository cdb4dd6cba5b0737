import { createClass, joinStudent, must, PASSWORD, type SignedInClient } from '../server/helpers/people';
import { createApiClient } from '../server/helpers/apiClient';
import { batch, rawRun, runItem } from '../server/helpers/runs';

/** What a crowd of phones saw. Times in ms, in rising order. */
export interface CrowdSeen {
  /** From sending all runs to the last receipt, one for each phone. */
  handIns: number[];
  /** A staff member signing in anew while the phones hand in, and before they did. */
  signIns: number[];
  signInsBefore: number[];
  /** Anything that was not a receipt, or not a good answer. */
  failures: string[];
}

/**
 * A lesson ends: that many phones, each with its own sign-in, hand in that many runs in one instant over
 * HTTP, and fetch the feed as the app does; somebody signs in as staff again and again meanwhile.
 *
 * @param lead  a coordinator on that server, with the shared test password and this e-mail address
 */
export async function crowd(
  url: string,
  lead: SignedInClient,
  email: string,
  { phones, runsEach }: { phones: number; runsEach: number },
): Promise<CrowdSeen> {
  const { code } = await createClass(lead);
  const failures: string[] = [];
  const students = [];
  for (let n = 0; n < phones; n += 1) students.push(await joinStudent({ url }, code, (n % 30) + 1, `Bob ${n}`));
  const signIn = () =>
    timed(async () => void must(await createApiClient(url).post('/api/sign-in', { email, password: PASSWORD })));
  const signInsBefore = [await signIn(), await signIn(), await signIn()];

  let isOver = false;
  const signIns: number[] = [];
  const staff = (async () => {
    while (!isOver) signIns.push(await signIn());
  })();
  const handIns = await Promise.all(
    students.map(async (student) => {
      const items = Array.from({ length: runsEach }, () => runItem(rawRun()));
      const ms = await timed(async () => {
        const reply = await student.post('/api/sync', batch(items));
        const verdicts = (reply.body as { verdicts?: { verdict: string }[] } | undefined)?.verdicts ?? [];
        const stored = verdicts.filter(({ verdict }) => verdict === 'stored').length;
        if (stored !== runsEach)
          failures.push(`${stored} of ${runsEach} stored: ${reply.status} ${reply.text.slice(0, 200)}`);
      });
      const feed = await student.get('/api/feed?after=0&limit=200');
      if (feed.status !== 200) failures.push(`feed: ${feed.status} ${feed.text.slice(0, 200)}`);
      return ms;
    }),
  );
  isOver = true;
  await staff;
  const rising = (times: number[]) => [...times].sort((a, b) => a - b);
  return { handIns: rising(handIns), signIns: rising(signIns), signInsBefore: rising(signInsBefore), failures };
}

async function timed(work: () => Promise<void>): Promise<number> {
  const start = performance.now();
  await work();
  return performance.now() - start;
}
