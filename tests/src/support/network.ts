import { vi } from 'vitest';

/** What stands at the other end of the wire in a test: bytes and status, nothing of our code. */
export type Wire = (path: string, init: RequestInit) => Response | Promise<Response>;

export interface SentRequest {
  path: string;
  method: string;
  headers: Headers;
  body: unknown;
}

/** Puts `wire` in the place of the network and keeps what was sent. */
export function plugIn(wire: Wire): SentRequest[] {
  const sent: SentRequest[] = [];
  vi.stubGlobal('fetch', async (path: string, init: RequestInit) => {
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined;
    sent.push({ path, method: init.method ?? 'GET', headers: new Headers(init.headers), body });
    return wire(path, init);
  });
  return sent;
}

export const json = (content: unknown, status = 200): Response =>
  new Response(JSON.stringify(content), { status, headers: { 'Content-Type': 'application/json; charset=utf-8' } });

export const page = (status = 200): Response =>
  new Response('<!doctype html><title>Sign in to Wi-Fi</title>', { status, headers: { 'Content-Type': 'text/html' } });

/** An error as our server words it. */
export const said = (status: number, code: string, message: string, path?: string): Response =>
  json({ error: { code, message, fields: path ? [{ path, message }] : [] } }, status);
