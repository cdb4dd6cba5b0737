import { classRoutes } from './classRoutes';
import { doorRoutes } from './doorRoutes';
import { describeApi } from './openApi';
import { peopleRoutes } from './peopleRoutes';
import type { Route } from './route';
import { runRoutes } from './runRoutes';
import { describeRoute, healthRoute } from './serverRoutes';

/** Made when first asked for: it is the same for as long as the process runs. */
let description: object | undefined;

/** Every route of the API: the registrar, the API description and the permission tests read this list. */
export const routes: readonly Route[] = [
  ...doorRoutes,
  ...peopleRoutes,
  ...classRoutes,
  ...runRoutes,
  healthRoute,
  describeRoute((version) => (description ??= describeApi(routes, version))),
];
