import { z } from 'zod';
import { HealthAnswer } from '@shared/schemas/sync';
import { route } from './route';

export const healthRoute = route({
  method: 'get',
  path: '/api/health',
  action: 'server.health',
  summary: 'Whether this is the server, and which life of its database',
  answer: HealthAnswer,
  handler: ({ deps }) => ({
    status: 'ok' as const,
    version: deps.version,
    server_epoch: deps.epoch,
    server_wall_ms: deps.now(),
  }),
});

export const describeRoute = (describe: (version: string) => object) =>
  route({
    method: 'get',
    path: '/api/openapi.json',
    action: 'server.describe',
    summary: 'This description',
    answer: z.looseObject({ openapi: z.string() }),
    handler: ({ deps }) => describe(deps.version) as { openapi: string },
  });
