import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { programVersion } from '../../src/base/version.js';

it('states one version in the program, the package and the changelog', () => {
  const root = join(import.meta.dirname, '..', '..');
  const { version } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { version: string };
  expect(programVersion).toBe(version);
  expect(readFileSync(join(root, 'CHANGELOG.md'), 'utf8')).toContain(`## ${version}`);
});
