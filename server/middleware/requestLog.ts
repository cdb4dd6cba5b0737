import type { IncomingMessage, ServerResponse } from 'node:http';
import type { Request } from 'express';
import type { Logger } from 'pino';
import { pinoHttp } from 'pino-http';

/**
 * One line for each request: method, route, status, time and a shortened address. Routes stand as they
 * are declared, and all that is not the API as 'page', because links carry tokens in their path. No
 * headers, no bodies.
 */
export function requestLog(logger: Logger) {
  return pinoHttp<IncomingMessage, ServerResponse>({
    logger,
    quietReqLogger: true,
    serializers: { req: () => undefined, res: () => undefined },
    customSuccessObject: (req, res, given: { responseTime: number }) => line(req, res, given.responseTime),
    customErrorObject: (req, res, _error, given: { responseTime: number }) => line(req, res, given.responseTime),
    customSuccessMessage: () => 'request',
    customErrorMessage: () => 'request',
    customLogLevel: (_req, res) => (res.statusCode >= 500 ? 'error' : 'info'),
  });
}

function line(req: IncomingMessage, res: ServerResponse, responseTime: number) {
  const { method, route, ip } = req as Request & { route?: { path: string } };
  return {
    method,
    route: route?.path.startsWith('/api/') ? route.path : 'page',
    status: res.statusCode,
    ms: responseTime,
    address: shortAddress(ip ?? ''),
  };
}

/** The network without the machine: 192.0.2.0, 2001:db8:1::. */
export function shortAddress(ip: string): string {
  const v4 = /(\d+\.\d+\.\d+)\.\d+$/.exec(ip);
  if (v4) return `${v4[1]}.0`;
  return `${ip.split(':').slice(0, 3).join(':')}::`;
}
