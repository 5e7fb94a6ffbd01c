import { z } from 'zod';
import { caseFileSchema } from './economics/caseFile.ts';
import { profileSchema } from './ingest/profile.ts';
import { stationFile } from './station/stationFile.ts';
import { tariffFileSchema } from './tariff/tariffFile.ts';

/** JSON Schema (draft 2020-12) of the files that people write, made from the schemas they are read with. */

const FILES = {
  station: { schema: stationFile, title: 'Station file', about: 'Pumps, system and storage of a station.' },
  tariff: {
    schema: tariffFileSchema,
    title: 'Tariff file',
    about: 'What electricity costs, by local clock and month.',
  },
  profile: { schema: profileSchema, title: 'Profile', about: 'A year of flow from 24 values per kind of day.' },
  case: { schema: caseFileSchema, title: 'Case file', about: 'A change of staging, its price and its terms.' },
} as const;

export type FileSchemaName = keyof typeof FILES;

export const FILE_SCHEMA_NAMES = Object.keys(FILES) as FileSchemaName[];

export type JsonSchema = Readonly<Record<string, unknown>>;

/** The JSON Schema of a kind of file, null for a name that is none. What it cannot say is checked by the reader. */
export function fileSchema(name: string): JsonSchema | null {
  if (!isFileSchema(name)) return null;
  const { schema, title, about } = FILES[name];
  return {
    $id: `urn:nth-pump:schema:${name}`,
    title,
    description: about,
    ...z.toJSONSchema(schema, { io: 'input' }),
  };
}

function isFileSchema(name: string): name is FileSchemaName {
  return Object.hasOwn(FILES, name);
}
