#!/usr/bin/env node
/** Writes the published JSON Schemas from their one source, `src/method/schema.ts`. Run after a build: `npm run schemas`. */
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { jsonSchemas } from '../dist/method/schema.js';

for (const [name, schema] of Object.entries(jsonSchemas())) {
  writeFileSync(
    join(import.meta.dirname, '..', 'templates', 'schemas', `${name}.schema.json`),
    `${JSON.stringify(schema, null, 2)}\n`,
  );
}
