import type { Document, Node, Pair, YAMLError } from 'yaml';
import { isAlias, isMap, isScalar, isSeq, LineCounter, parseDocument } from 'yaml';
import type { KeyPath } from './key-path.js';
import { keyPathText } from './key-path.js';
import type { Place, Problem } from './problems.js';
import { firstDeepLine } from './yaml-depth.js';

/** A YAML file as plain data, and where each chain of keys stands in it. */
export interface YamlFile {
  /** Undefined where `problems` are so bad that nothing could be read. */
  readonly value: unknown;
  readonly place: (path: KeyPath) => Place;
  readonly problems: readonly Problem[];
}

const deepest = 64;
// A study repeats a few short lists at most; a bomb repeats thousands.
const mostAliased = 10_000;
const forbiddenKeys = new Set(['__proto__', 'constructor', 'prototype']);

/**
 * Reads YAML 1.2 (core schema) with strict limits: no duplicate keys, no keys that reach into JavaScript's objects, no tags, one document,
 * bounded depth and bounded repetition through aliases. Merge keys (`<<`) are YAML 1.1 and so are ordinary, unknown keys.
 */
export function parseYaml(text: string, file: string): YamlFile {
  const deepLine = firstDeepLine(text);
  if (deepLine !== null) return { value: undefined, place: () => ({ file }), problems: [tooDeep({ file, line: deepLine })] };
  const lines = new LineCounter();
  const document = parseDocument(text, { lineCounter: lines, version: '1.2', schema: 'core', uniqueKeys: false, prettyErrors: false, logLevel: 'error' });
  const at = (offset: number, path?: string): Place => {
    const { line, col } = lines.linePos(offset);
    return { file, line, column: col, ...(path === undefined || path === '' ? {} : { path }) };
  };
  const problems = syntaxProblems(document, at);
  const offsets = new Map<string, number>();
  const place = (path: KeyPath): Place => at(nearestOffset(offsets, path), keyPathText(path));
  if (problems.length > 0) return { value: undefined, place, problems };
  const walk: Walk = { offsets, at, problems, anchors: new Map(), open: new Set(), aliased: 0, insideAlias: false, broken: false };
  const value = document.contents === null ? null : plain(document.contents, [], walk);
  return { value: walk.broken ? undefined : value, place, problems };
}

/** Errors of the parser, tags, and a directive that asks for another YAML. */
function syntaxProblems(document: Document.Parsed, at: (offset: number) => Place): Problem[] {
  const faults = [...document.errors, ...document.warnings];
  // A stack that overflows is reported once for each level.
  const deep = faults.find(({ code }) => code === 'RESOURCE_EXHAUSTION');
  if (deep !== undefined) return [tooDeep(at(deep.pos[0]))];
  const problems: Problem[] = [];
  // One slip makes a parser stumble over all that follows: only the first place says something.
  const [first] = [...faults].sort((a, b) => a.pos[0] - b.pos[0]);
  if (first !== undefined) problems.push(syntaxProblem(first, at(first.pos[0])));
  const { explicit, version } = document.directives.yaml;
  if (explicit === true && version !== '1.2') {
    problems.push({ what: 'a file asks for another version of YAML', where: at(0), found: version, expected: '1.2', remedy: 'remove the line that starts with %YAML' });
  }
  return problems;
}

function syntaxProblem({ code, message }: YAMLError, where: Place): Problem {
  const start = { what: 'a file is not valid YAML', where };
  if (code === 'MULTIPLE_DOCS') return { ...start, found: 'a second document', expected: 'one document in a file', remedy: 'remove the line --- and what follows it' };
  if (code === 'TAG_RESOLVE_FAILED') return { ...start, found: message, expected: 'YAML without tags', remedy: 'remove the tag: the word that starts with !' };
  return {
    ...start,
    found: message,
    expected: 'YAML 1.2',
    remedy: 'check this line and the one before it: indentation, brackets, and quotes around text that holds { } [ ] , : or #',
  };
}

function tooDeep(where: Place): Problem {
  return {
    what: 'a file is nested too deeply',
    where,
    found: 'more levels, or more indentation, than can be read',
    expected: `the few levels that a study has, at most ${String(deepest)}`,
    remedy: 'check the brackets and the indentation',
  };
}

/** Where the value stands, or the nearest part of the file that holds its place. */
function nearestOffset(offsets: ReadonlyMap<string, number>, path: KeyPath): number {
  for (let length = path.length; length >= 0; length -= 1) {
    const offset = offsets.get(identity(path.slice(0, length)));
    if (offset !== undefined) return offset;
  }
  return 0;
}

const identity = (path: KeyPath): string => JSON.stringify(path);

interface Walk {
  readonly offsets: Map<string, number>;
  readonly at: (offset: number, path?: string) => Place;
  readonly problems: Problem[];
  /** The last node with each anchor so far. */
  readonly anchors: Map<string, Node>;
  /** Nodes that are being read, to find one that holds itself. */
  readonly open: Set<Node>;
  /** Values that were reached through aliases. */
  aliased: number;
  insideAlias: boolean;
  /** Whether parts are missing, so that the rest is not worth checking. */
  broken: boolean;
}

function plain(node: unknown, path: KeyPath, walk: Walk): unknown {
  const offset = offsetOf(node);
  if (!walk.offsets.has(identity(path))) walk.offsets.set(identity(path), offset);
  if (walk.insideAlias) walk.aliased += 1;
  if (walk.aliased > mostAliased) return undefined;
  if (path.length > deepest) {
    walk.broken = true;
    walk.problems.push(tooDeep(walk.at(offset)));
    return undefined;
  }
  if (isAlias(node)) return aliasValue(node.source, offset, path, walk);
  if (isScalar(node) || isMap(node) || isSeq(node)) {
    if (node.anchor !== undefined && !walk.insideAlias) walk.anchors.set(node.anchor, node);
    walk.open.add(node);
    const value = isMap(node) ? mapValue(node.items, path, walk) : isSeq(node) ? node.items.map((item, i) => plain(item, [...path, i], walk)) : scalarValue(node, path, walk);
    walk.open.delete(node);
    return value;
  }
  return null;
}

function offsetOf(node: unknown): number {
  return isAlias(node) || isScalar(node) || isMap(node) || isSeq(node) ? (node.range?.[0] ?? 0) : 0;
}

function aliasValue(name: string, offset: number, path: KeyPath, walk: Walk): unknown {
  const where = walk.at(offset, keyPathText(path));
  const target = walk.anchors.get(name);
  if (target === undefined || walk.open.has(target)) {
    walk.broken = true;
    walk.problems.push({
      what: 'an alias leads nowhere',
      where,
      found: `*${name}`,
      expected: target === undefined ? `an anchor &${name} before it` : 'an anchor outside of the value that it repeats',
      remedy: 'write the value out',
    });
    return undefined;
  }
  const outer = walk.insideAlias;
  walk.insideAlias = true;
  const before = walk.aliased;
  const value = plain(target, path, walk);
  walk.insideAlias = outer;
  if (!outer && before <= mostAliased && walk.aliased > mostAliased) {
    walk.broken = true;
    walk.problems.push({
      what: 'a file repeats too much through aliases',
      where,
      found: `more than ${String(mostAliased)} repeated values`,
      expected: `at most ${String(mostAliased)}`,
      remedy: 'write the values out, or put them into an array file',
    });
  }
  return value;
}

function mapValue(pairs: readonly Pair[], path: KeyPath, walk: Walk): Record<string, unknown> {
  const entries: [string, unknown][] = [];
  const seen = new Set<string>();
  for (const pair of pairs) {
    const key = keyText(pair.key);
    const offset = offsetOf(pair.key);
    const inside = [...path, key ?? '?'];
    const fault = key === null ? notText : forbiddenKeys.has(key) ? forbidden : seen.has(key) ? duplicate : null;
    if (fault !== null) walk.problems.push({ ...fault, where: walk.at(offset, keyPathText(inside)), ...(key === null ? {} : { found: key }) });
    if (key === null || fault !== null) continue;
    seen.add(key);
    walk.offsets.set(identity(inside), offset);
    entries.push([key, plain(pair.value, inside, walk)]);
  }
  return Object.fromEntries(entries);
}

const notText = { what: 'a key is not a word', found: 'no text, or a list or map as a key', expected: 'a word before the colon', remedy: 'check the line for a stray ? or : or brackets' };
const forbidden = { what: 'a key is not allowed', expected: 'a name of the study', remedy: 'choose another name: this one has a meaning of its own in JavaScript' };
const duplicate = { what: 'a key stands twice', expected: 'each key once', remedy: 'remove one of the two' };

function keyText(key: unknown): string | null {
  if (!isScalar(key) || key.value === null) return null;
  return typeof key.value === 'string' ? key.value : (key.source ?? null);
}

function scalarValue(node: { readonly value: unknown; readonly source?: string; readonly range?: readonly [number, number, number] | null }, path: KeyPath, walk: Walk): unknown {
  const { value, source } = node;
  if (typeof value === 'number' && source !== undefined && /^[-+]?\d+$/.test(source) && BigInt(source.replace('+', '')) !== BigInt(value)) {
    walk.problems.push({
      what: 'a whole number is too large to be exact',
      where: walk.at(offsetOf(node), keyPathText(path)),
      found: source.slice(0, 60),
      expected: 'at most 2^53 in size',
      remedy: 'use smaller numbers: seeds only need to differ',
    });
  }
  return value;
}
