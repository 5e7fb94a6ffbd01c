import { migrate } from '../../db/migrate.ts';
import { openDatabase } from '../../db/open.ts';
import { createApp } from '../../server/app.ts';

interface Layer {
  readonly route?: { readonly path: string; readonly methods: Record<string, boolean> };
  readonly handle?: { readonly stack?: readonly Layer[] };
}

/** `GET /api/stations/:id`, for every route that a server answers. */
export function routes(): string[] {
  const db = openDatabase(':memory:');
  migrate(db);
  const [now, log] = [() => 0, () => {}];
  const app = createApp({ db, now, version: '0', clientFolder: null, token: null, loopback: true, log });
  const found: string[] = [];
  const walk = (layers: readonly Layer[]) => {
    for (const { route, handle } of layers) {
      for (const method of Object.keys(route?.methods ?? {})) {
        if (method !== '_all') found.push(`${method.toUpperCase()} /api${route!.path}`);
      }
      if (handle?.stack) walk(handle.stack);
    }
  };
  walk((app as unknown as { router: { stack: readonly Layer[] } }).router.stack);
  db.close();
  return found;
}
