/** npm run schema: JSON Schema of a kind of file, or the OpenAPI document of the interface. */
import { readFileSync } from 'node:fs';
import { refuse } from '../server/errors.ts';
import { openApi } from '../server/openapi.ts';
import { FILE_SCHEMA_NAMES, fileSchema } from '../server/schemas.ts';
import { runCommand } from './support/command.ts';

const NAMES = [...FILE_SCHEMA_NAMES, 'openapi'];

const HELP = `npm run --silent schema -- NAME

Prints the JSON Schema of a kind of file, or the OpenAPI 3.1 description of the HTTP interface.

  NAME      ${NAMES.join(', ')}
  --help    this text

Exit code 0 on success, 2 when something is to be mended, 1 for anything unexpected.
`;

runCommand(HELP, { values: [], operand: true }, (given) => {
  const name = String(given.operand ?? '');
  const schema = name === 'openapi' ? openApi(version()) : fileSchema(name);
  if (schema === null) {
    refuse({
      code: 'bad_option',
      file: 'arguments',
      at: '',
      found: name === '' ? 'no name' : `'${name}'`,
      wanted: `one of ${NAMES.join(', ')}`,
    });
  }
  process.stdout.write(`${JSON.stringify(schema, null, 2)}\n`);
});

function version(): string {
  const manifest = readFileSync(new URL('../package.json', import.meta.url), 'utf8');
  return (JSON.parse(manifest) as { version: string }).version;
}
