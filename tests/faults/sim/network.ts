import { readAnswer, requestBytes } from './httpText';
import type { SimServer } from './simServer';
import type { Tab } from './tab';
import type { VirtualTime } from './virtualTime';

/** What can happen to one exchange between a phone and the server. */
export type Fault =
  /** Nothing listens where the phone asks. */
  | { kind: 'refused' }
  /** The request, or the answer, is never heard of again. */
  | { kind: 'lost_request' }
  | { kind: 'lost_answer' }
  /** The connection breaks when that share of the bytes is through. */
  | { kind: 'cut_request'; part: number }
  | { kind: 'cut_answer'; part: number }
  /** Either way takes that long; what was asked later may arrive earlier. */
  | { kind: 'slow'; there_ms: number; back_ms: number }
  /** The request arrives twice in one instant, or a second time much later. */
  | { kind: 'twin' }
  | { kind: 'late_copy'; after_ms: number }
  /** Something in between answers in the server's place. */
  | { kind: 'portal'; how: 'page' | 'redirect' | 'json' }
  | { kind: 'status'; status: number; body: 'page' | 'ours' | 'empty' };

interface Outcome {
  resolve: (response: Response) => void;
  reject: (error: Error) => void;
}

/** One request on its way. */
export interface Exchange {
  /** Nobody waits for it any more; what is under way still arrives. */
  leave(): void;
}

const WAY_MS = 20;

/** The way of one phone to the server, with its cookies: the worst a network can do, one exchange at a time. */
export class Network {
  private readonly coming: Fault[] = [];
  private cookie = '';
  isOff = false;
  /** Gives a fault to exchanges that have none of their own. */
  weather: () => Fault | null = () => null;

  constructor(
    private readonly time: VirtualTime,
    private readonly server: SimServer,
    private readonly onAnswer: (bytes: Buffer) => void,
    private readonly note: (what: string) => void,
  ) {}

  /** The next exchange meets this. */
  meet(fault: Fault): void {
    this.coming.push(fault);
  }

  clear(): void {
    this.coming.length = 0;
    this.isOff = false;
    this.weather = () => null;
  }

  begin(tab: Tab, path: string, init: RequestInit, outcome: Outcome): Exchange {
    let isLeft = false;
    const reject = () => isLeft || outcome.reject(new TypeError('Failed to fetch'));
    const exchange: Exchange = { leave: () => (isLeft = true) };
    const request = requestBytes({
      method: init.method ?? 'GET',
      path,
      headers: { ...(init.headers as Record<string, string>), 'Sec-Fetch-Site': 'same-origin', ...this.cookies() },
      body: typeof init.body === 'string' ? init.body : '',
    });
    const fault: Fault | null = this.isOff ? { kind: 'refused' } : (this.coming.shift() ?? this.weather());
    this.note(`${init.method ?? 'GET'} ${path} ${fault?.kind ?? ''}`);
    const [there, back] = fault?.kind === 'slow' ? [fault.there_ms, fault.back_ms] : [WAY_MS, WAY_MS];

    const hear = (bytes: Buffer | null) =>
      this.time.after(back, () => {
        if (isLeft) return;
        if (!bytes || bytes.length === 0) return void reject();
        if (fault?.kind === 'cut_answer') bytes = bytes.subarray(0, Math.floor(bytes.length * fault.part));
        const answer = readAnswer(bytes);
        if (!answer) return void reject();
        for (const set of answer.headers.getSetCookie()) this.keepCookie(set);
        if (tab.endsAt('answered', path)) return;
        this.note(`${path} ${answer.status}`);
        outcome.resolve(response(answer.status, answer.headers, answer.isWhole ? answer.text : null));
      });
    const deliver = async (part = 1) => {
      const bytes = await this.server.deliver(request, part);
      if (bytes) this.onAnswer(bytes);
      return bytes;
    };

    if (tab.endsAt('sending', path)) {
      this.time.after(there, () => void deliver(0.5));
      return exchange;
    }
    this.time.after(there, () => {
      switch (fault?.kind) {
        case 'refused':
          return void reject();
        case 'lost_request':
          return;
        case 'lost_answer':
          return void deliver();
        case 'cut_request':
          return void deliver(fault.part).then(() => hear(null));
        case 'twin':
          void deliver();
          return void deliver().then(hear);
        case 'late_copy':
          this.time.after(fault.after_ms, () => void deliver());
          return void deliver().then(hear);
        case 'portal':
        case 'status':
          return void this.time.after(back, () => isLeft || outcome.resolve(inBetween(fault)));
        default:
          return void deliver().then(hear);
      }
    });
    return exchange;
  }

  private cookies(): Record<string, string> {
    return this.cookie ? { Cookie: this.cookie } : {};
  }

  private keepCookie(set: string): void {
    const [pair = ''] = set.split(';');
    this.cookie = pair.endsWith('=') ? '' : pair;
  }
}

function inBetween(fault: Extract<Fault, { kind: 'portal' | 'status' }>): Response {
  const html = new Headers({ 'Content-Type': 'text/html; charset=utf-8' });
  const json = new Headers({ 'Content-Type': 'application/json; charset=utf-8' });
  const page = '<!doctype html><title>Sign in to Wi-Fi</title>';
  if (fault.kind === 'portal') {
    if (fault.how === 'redirect') return Object.assign(response(0, new Headers(), ''), { type: 'opaqueredirect' });
    return fault.how === 'page' ? response(200, html, page) : response(200, json, '{"ok":true}');
  }
  if (fault.body === 'page') return response(fault.status, html, page);
  if (fault.body === 'empty') return response(fault.status, new Headers(), '');
  const message = 'The server is busy.';
  return response(fault.status, json, JSON.stringify({ error: { code: 'in_between', message, fields: [] } }));
}

/** The parts of a browser's Response that a page reads; `text` null breaks off while it is read. */
function response(status: number, headers: Headers, text: string | null): Response {
  return {
    status,
    ok: status >= 200 && status < 300,
    type: 'basic',
    headers,
    text: () => (text === null ? Promise.reject(new TypeError('network error')) : Promise.resolve(text)),
  } as unknown as Response;
}
