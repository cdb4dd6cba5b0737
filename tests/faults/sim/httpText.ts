/** Requests and answers of HTTP/1.1 as bytes, one to a connection. */

export interface HttpRequest {
  method: string;
  path: string;
  headers: Record<string, string>;
  body: string;
}

export function requestBytes({ method, path, headers, body }: HttpRequest): Buffer {
  const content = Buffer.from(body);
  const lines = Object.entries({
    Host: 'swaymark.test',
    Connection: 'close',
    ...headers,
    ...(content.length > 0 ? { 'Content-Length': String(content.length) } : {}),
  }).map(([name, text]) => `${name}: ${text}`);
  return Buffer.concat([Buffer.from(`${method} ${path} HTTP/1.1\r\n${lines.join('\r\n')}\r\n\r\n`), content]);
}

export interface HttpAnswer {
  status: number;
  headers: Headers;
  text: string;
  /** False when bytes are missing: the browser's reading of the body fails. */
  isWhole: boolean;
}

/** What a browser makes of these bytes; null when not even the head is whole. */
export function readAnswer(bytes: Buffer): HttpAnswer | null {
  const end = bytes.indexOf('\r\n\r\n');
  if (end < 0) return null;
  const [statusLine = '', ...lines] = bytes.subarray(0, end).toString('latin1').split('\r\n');
  const headers = new Headers();
  for (const line of lines) {
    const colon = line.indexOf(':');
    headers.append(line.slice(0, colon), line.slice(colon + 1).trim());
  }
  const body = bytes.subarray(end + 4);
  if (headers.has('transfer-encoding')) throw new Error('this server is expected to tell the length of its answers');
  const length = Number(headers.get('content-length') ?? 0);
  return {
    status: Number(statusLine.split(' ')[1]),
    headers,
    text: body.toString(),
    isWhole: body.length >= length,
  };
}
