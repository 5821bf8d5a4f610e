import { type Document, isMap, isScalar, LineCounter, parseDocument } from 'yaml';
import type { z } from 'zod';
import { limits } from '../base/limits.js';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { nearestWord } from './nearestWord.js';

type Path = readonly (string | number)[];

/** A parsed file whose every key still knows its line. */
export interface YamlFile<T> {
  readonly value: T;
  /** Makes a problem at a key: file, line and key are filled in. */
  at(path: Path, code: string, message: string, hint?: string): Problem;
}

/**
 * Parses YAML 1.2 and checks it against a schema; every fault is reported, in order of line.
 *
 * @param text     the file
 * @param fileName for messages
 * @param schema   the zod schema of the format
 * @returns the typed value with its positions
 * @errors  method-too-large, yaml-syntax, key-unknown, key-missing, value-wrong
 * @source  YAML 1.2.2; positions by the yaml package
 */
export function readYaml<S extends z.ZodType>(
  text: string,
  fileName: string,
  schema: S,
): Result<YamlFile<z.infer<S>>, readonly Problem[]> {
  if (text.length > limits.methodSizeBytesMax) {
    return fail([
      problemAt(
        fileName,
        undefined,
        undefined,
        'method-too-large',
        `the file holds ${text.length} characters; at most ${limits.methodSizeBytesMax} are read`,
      ),
    ]);
  }
  const lineCounter = new LineCounter();
  const document = parseDocument(text, { lineCounter, version: '1.2', uniqueKeys: true, prettyErrors: false });
  if (document.errors.length > 0) {
    return fail(
      document.errors
        .slice(0, 20)
        .map((error) =>
          problemAt(fileName, lineCounter.linePos(error.pos[0]).line, undefined, 'yaml-syntax', plainSyntax(error.message)),
        ),
    );
  }
  const value = toPlain(document);
  if (!value.ok) return fail([problemAt(fileName, undefined, undefined, 'yaml-syntax', value.problem)]);
  const lineOf = (path: Path) => lineAt(document, path, lineCounter);
  const at: YamlFile<unknown>['at'] = (path, code, message, hint) => problemAt(fileName, lineOf(path), path, code, message, hint);
  const parsed = schema.safeParse(value.value);
  if (parsed.success) return ok({ value: parsed.data, at });
  const problems = parsed.error.issues.flatMap((issue) => problemsOf(issue, value.value, schema, at));
  return fail([...problems].sort((a, b) => (a.where?.line ?? 0) - (b.where?.line ?? 0)));
}

function toPlain(document: Document): Result<unknown, string> {
  try {
    return ok(document.toJS({ maxAliasCount: 50 }));
  } catch (cause) {
    return fail(cause instanceof Error ? cause.message : String(cause));
  }
}

type Issue = z.core.$ZodIssue;

function problemsOf(issue: Issue, root: unknown, schema: z.ZodType, at: YamlFile<unknown>['at']): Problem[] {
  const path = issue.path.filter((part): part is string | number => typeof part !== 'symbol');
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => {
      const nearest = nearestWord(key, keysAt(schema, path));
      return at(
        [...path, key],
        'key-unknown',
        `unknown key "${key}"`,
        nearest !== undefined ? `Did you mean "${nearest}"?` : `Known keys here: ${keysAt(schema, path).join(', ')}.`,
      );
    });
  }
  const found = valueAt(root, path);
  if (found === undefined)
    return [at(path, 'key-missing', `"${path.at(-1) ?? 'the file'}" is missing; expected ${expectation(issue)}`)];
  const nearest =
    issue.code === 'invalid_value' && typeof found === 'string' ? nearestWord(found, issue.values.map(String)) : undefined;
  return [
    at(
      path,
      'value-wrong',
      `found ${shown(found)}; expected ${expectation(issue)}`,
      nearest !== undefined ? `Did you mean "${nearest}"?` : undefined,
    ),
  ];
}

/** What would be right, in words. */
function expectation(issue: Issue): string {
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'record' || issue.expected === 'object'
        ? 'a block of keys'
        : issue.expected === 'array'
          ? 'a list'
          : `a ${issue.expected === 'string' ? 'text' : issue.expected}`;
    case 'invalid_value':
      return `one of ${issue.values.map((value) => `"${String(value)}"`).join(', ')}`;
    case 'too_small':
      return issue.origin === 'number' || issue.origin === 'int'
        ? `a number ${issue.inclusive ? 'of at least' : 'above'} ${issue.minimum}`
        : `at least ${issue.minimum} ${issue.origin === 'string' ? 'characters' : 'entries'}`;
    case 'too_big':
      return issue.origin === 'number' || issue.origin === 'int'
        ? `a number of at most ${issue.maximum}`
        : `at most ${issue.maximum} ${issue.origin === 'string' ? 'characters' : 'entries'}`;
    case 'invalid_format':
      return issue.message.startsWith('Invalid')
        ? `the form ${String((issue as { pattern?: string }).pattern ?? issue.format)}`
        : issue.message;
    case 'invalid_union':
      return issue.errors
        .map((branch) => (branch[0] ? expectation(branch[0]) : ''))
        .filter((part) => part !== '')
        .join(', or ');
    default:
      return issue.message;
  }
}

function shown(value: unknown): string {
  if (value === null) return 'nothing';
  if (typeof value === 'string') return `"${value.length > 60 ? `${value.slice(0, 57)}...` : value}"`;
  if (Array.isArray(value)) return `a list of ${value.length}`;
  return typeof value === 'object' ? 'a block of keys' : String(value);
}

function valueAt(root: unknown, path: Path): unknown {
  let value = root;
  for (const part of path) {
    if (value === null || typeof value !== 'object' || !Object.hasOwn(value, part)) return undefined;
    value = (value as Record<string | number, unknown>)[part];
  }
  return value;
}

/** The keys a schema knows at a path; lists and optional wrappers are looked through. */
function keysAt(schema: z.ZodType, path: Path): string[] {
  let current = unwrap(schema);
  for (const part of path) {
    const next = typeof part === 'number' ? current.element : current.shape?.[part];
    if (next === undefined) return [];
    current = unwrap(next);
  }
  return Object.keys(current.shape ?? {});
}

interface OpenSchema {
  shape?: Record<string, OpenSchema>;
  element?: OpenSchema;
  unwrap?: () => OpenSchema;
  def?: { type: string };
}

function unwrap(schema: unknown): OpenSchema {
  let current = schema as OpenSchema;
  while (current.def?.type === 'optional' && current.unwrap) current = current.unwrap();
  return current;
}

/** Line of the key at a path, or of its nearest parent that is there. */
function lineAt(document: Document, path: Path, lineCounter: LineCounter): number | undefined {
  for (let length = path.length; length > 0; length -= 1) {
    const parent = length === 1 ? document.contents : document.getIn(path.slice(0, length - 1), true);
    const last = path[length - 1]!;
    if (isMap(parent)) {
      const pair = parent.items.find(({ key }) => isScalar(key) && key.value === last);
      const offset = pair && isScalar(pair.key) ? pair.key.range?.[0] : undefined;
      if (offset !== undefined) return lineCounter.linePos(offset).line;
    }
    const node = document.getIn(path.slice(0, length), true) as { range?: [number, number, number] } | undefined;
    if (node?.range) return lineCounter.linePos(node.range[0]).line;
  }
  return 1;
}

function problemAt(
  file: string,
  line: number | undefined,
  path: Path | undefined,
  code: string,
  message: string,
  hint?: string,
): Problem {
  const where = {
    file,
    ...(line !== undefined ? { line } : {}),
    ...(path !== undefined && path.length > 0 ? { key: keyText(path) } : {}),
  };
  return { code, area: 'method', message, where, retry: 'never', ...(hint !== undefined ? { hint } : {}) };
}

/** `species[1].signals[0].shift` */
export function keyText(path: Path): string {
  return path.map((part, index) => (typeof part === 'number' ? `[${part}]` : index === 0 ? part : `.${part}`)).join('');
}

function plainSyntax(message: string): string {
  return message.replace(/\s+/g, ' ').trim();
}
