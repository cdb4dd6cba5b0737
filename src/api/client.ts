import type { z } from 'zod';
import { ApiError } from './ApiError';
import { readTolerantly } from './tolerant';

/** Schemas load when first needed: zod is not in the way of the tap pad. */
export type LazySchema<T> = () => Promise<z.ZodType<T>>;

export interface RequestOptions<T> {
  method?: 'GET' | 'POST' | 'DELETE';
  /** Sent as JSON. */
  body?: unknown;
  headers?: Record<string, string>;
  /** Shape of a good answer; fields beside it are passed over. An answer of any other shape is not an answer. */
  answer: LazySchema<T>;
  /** Until the whole answer is here, ms. Default 15 s. */
  timeout_ms?: number;
}

/**
 * Asks our server. Resolves only with an answer of the shape asked for.
 *
 * @param path  under /api, with its leading slash
 * @throws {ApiError} for everything else, the network included
 */
export async function request<T>(path: string, options: RequestOptions<T>): Promise<T> {
  const { response, text } = await exchange(path, options);
  if (response.type === 'opaqueredirect' || (response.status >= 300 && response.status < 400))
    throw new ApiError('not_ours', response.status, '', 'the address leads somewhere else');
  if (!response.ok) throw await refusalFrom(response, text);
  const content = isJson(response) ? parse(text) : undefined;
  const answer = readTolerantly(await load(options.answer), content);
  if (answer === undefined) throw new ApiError('not_ours', response.status, '', 'the answer is not one of this server');
  return answer;
}

/** One exchange, the reading of the body included, within the time allowed. */
async function exchange(path: string, options: RequestOptions<unknown>): Promise<{ response: Response; text: string }> {
  const stop = new AbortController();
  let isLate = false;
  const timer = setTimeout(() => {
    isLate = true;
    stop.abort();
  }, options.timeout_ms ?? 15_000);
  try {
    const response = await fetch(`/api${path}`, {
      method: options.method ?? 'GET',
      headers: { Accept: 'application/json', 'X-Swaymark': '1', ...jsonHeader(options), ...options.headers },
      body: options.body === undefined ? undefined : JSON.stringify(options.body),
      credentials: 'same-origin',
      cache: 'no-store',
      redirect: 'manual',
      signal: stop.signal,
    });
    return { response, text: await response.text() };
  } catch {
    if (isLate) throw new ApiError('timeout', 0, '', 'no answer in time');
    throw new ApiError('offline', 0, '', 'nothing answered');
  } finally {
    clearTimeout(timer);
  }
}

async function refusalFrom(response: Response, text: string): Promise<ApiError> {
  const { status } = response;
  const shape = await load(() => import('@shared/schemas/errors').then((module) => module.ErrorAnswer));
  const ours = readTolerantly(shape, isJson(response) ? parse(text) : undefined)?.error;
  if (status >= 500 || status === 429)
    return new ApiError('server', status, ours?.code ?? '', ours?.message ?? `status ${status}`, ours?.fields);
  if (!ours) return new ApiError('not_ours', status, '', `status ${status} from something else`);
  return new ApiError(status === 401 ? 'signed_out' : 'refused', status, ours.code, ours.message, ours.fields);
}

/** A schema whose file cannot be fetched any more is as good as no network: the answer stays unread. */
async function load<T>(schema: LazySchema<T>): Promise<z.ZodType<T>> {
  try {
    return await schema();
  } catch {
    throw new ApiError('offline', 0, '', 'a part of the app could not be loaded');
  }
}

const jsonHeader = (options: RequestOptions<unknown>): Record<string, string> =>
  options.body === undefined ? {} : { 'Content-Type': 'application/json' };
const isJson = (response: Response) => (response.headers.get('content-type') ?? '').includes('application/json');

function parse(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
