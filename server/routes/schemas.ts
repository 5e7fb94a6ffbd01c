import type { Router } from 'express';
import { resource } from '../body.ts';
import { refuse } from '../errors.ts';
import { openApi } from '../openapi.ts';
import { FILE_SCHEMA_NAMES, fileSchema } from '../schemas.ts';

/** The forms of files, and of the interface itself, for programs that want to check before they send. */
export function schemaRoutes(router: Router, { version }: { readonly version: string }): void {
  resource(router, '/schemas/:name', {
    get: [
      (request, response) => {
        const name = String(request.params.name);
        const schema = fileSchema(name);
        if (schema === null) {
          const wanted = `one of ${FILE_SCHEMA_NAMES.join(', ')}`;
          refuse({ code: 'not_found', file: 'request', at: 'name', found: `'${name}'`, wanted });
        }
        response.type('application/schema+json').send(JSON.stringify(schema, null, 2));
      },
    ],
  });
  resource(router, '/openapi.json', { get: [(_request, response) => void response.json(openApi(version))] });
}
