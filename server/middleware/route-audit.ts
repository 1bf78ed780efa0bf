import type { Express } from 'express';
import { PERMISSIONS } from '../permissions';

interface Layer {
  readonly route?: { readonly path: unknown; readonly methods: Readonly<Record<string, boolean>> };
  readonly handle?: { readonly stack?: readonly Layer[] };
}

/** Routes that belong to no table: the health check, what does not exist, and the client's files. */
const OUTSIDE = new Set(['GET /healthz', '* /api/*rest', 'GET /{*path}', 'GET /']);

/** Every route of an app as `GET /path`, below whatever router; `*` for all methods. */
export function listRoutes(app: Express): string[] {
  return listLayers((app.router as unknown as { stack: readonly Layer[] }).stack);
}

function listLayers(layers: readonly Layer[]): string[] {
  return layers.flatMap(({ route, handle }) => {
    if (route === undefined) return listLayers(handle?.stack ?? []);
    const methods = Object.keys(route.methods).map((method) =>
      method === '_all' ? '*' : method.toUpperCase(),
    );
    const names = methods.includes('*') || methods.length > 8 ? ['*'] : methods;
    return names.map((method) => `${method} ${String(route.path)}`);
  });
}

/** @throws Error that names a route the table of permissions does not know */
export function refuseUnlistedRoutes(app: Express): void {
  const unlisted = listRoutes(app).filter((route) => !OUTSIDE.has(route) && !(route in PERMISSIONS));
  if (unlisted.length > 0) throw new Error(`not in the table of permissions: ${unlisted.join(', ')}`);
}
