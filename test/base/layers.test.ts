import { readdirSync, readFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { describe, expect, it } from 'vitest';

/** Top to bottom: a folder imports only from folders further down. */
const layers = [
  'commands',
  'watch',
  'report',
  'tell',
  'record',
  'series',
  'amount',
  'point',
  'signal',
  'spectrum',
  'decode',
  'method',
  'pattern',
  'base',
];
/** Everything from the series down is pure: time, disk, randomness and printing come in as arguments. */
const pureLayers = layers.slice(layers.indexOf('series'));
const impure: readonly (readonly [RegExp, string])[] = [
  [/from 'node:(fs|fs\/promises|child_process|net|http|https|worker_threads|os|process)'/, 'reaches outside the program'],
  [/\bDate\.now\(|\bnew Date\(\)|\bperformance\.now\(/, 'reads a clock'],
  [/\bMath\.random\(|\brandomUUID\(|\brandomBytes\(/, 'draws a random number'],
  [/\bconsole\.|\bprocess\.(stdout|stderr|env|exit)/, 'prints or reads the environment'],
];

const sourceFolder = join(import.meta.dirname, '..', '..', 'src');
const files = readdirSync(sourceFolder, { recursive: true, encoding: 'utf8' })
  .filter((name) => name.endsWith('.ts'))
  .map((name) => ({ name, text: readFileSync(join(sourceFolder, name), 'utf8') }));

function layerOf(name: string): string {
  return name.includes('/') ? name.slice(0, name.indexOf('/')) : 'main';
}

function importedLayers(name: string, text: string): { layer: string; target: string }[] {
  return [...text.matchAll(/(?:from|import)\s*\(?\s*'(\.[^']+)'/g)].map((match) => {
    const target = relative(sourceFolder, join(sourceFolder, name, '..', match[1]!));
    return { layer: layerOf(target), target };
  });
}

describe('the house', () => {
  it('has dependencies that point one way', () => {
    const wrong = files.flatMap(({ name, text }) => {
      const from = layerOf(name);
      if (from === 'main') return [];
      return importedLayers(name, text)
        .filter(({ layer }) => layer !== from && !isAllowed(from, layer))
        .map(({ target }) => `${name} imports ${target}`);
    });
    expect(wrong).toEqual([]);
  });

  it('keeps the core free of disk, clock, chance and printing', () => {
    const wrong = files
      .filter(({ name }) => pureLayers.includes(layerOf(name)))
      .flatMap(({ name, text }) => impure.filter(([pattern]) => pattern.test(text)).map(([, why]) => `${name} ${why}`));
    expect(wrong).toEqual([]);
  });

  it('keeps every file within a head (250 lines), tables of data aside', () => {
    const long = files
      .filter(({ name }) => !/\/data\//.test(name))
      .map(({ name, text }) => ({ name, lines: text.split('\n').length }))
      .filter(({ lines }) => lines > 250)
      .map(({ name, lines }) => `${name}: ${lines} lines`);
    expect(long).toEqual([]);
  });
});

function isAllowed(from: string, to: string): boolean {
  if (from === 'simulate') return layers.indexOf(to) >= layers.indexOf('amount');
  if (to === 'simulate') return from === 'commands';
  return layers.indexOf(from) < layers.indexOf(to);
}
