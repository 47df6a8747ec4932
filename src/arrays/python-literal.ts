/** A Python literal of the kinds that NPY headers hold: a tuple or list is an array, a dict a map, an int a bigint. */
export type PythonValue = string | bigint | boolean | null | readonly PythonValue[] | ReadonlyMap<string, PythonValue>;

const deepest = 16;

/** Reads a Python literal; undefined where the text is anything else. Nothing is evaluated. */
export function parsePythonLiteral(text: string): PythonValue | undefined {
  const reader: Reader = { text, at: 0 };
  const value = parseValue(reader, 0);
  skipSpace(reader);
  return reader.at === text.length ? value : undefined;
}

interface Reader {
  readonly text: string;
  at: number;
}

function parseValue(reader: Reader, depth: number): PythonValue | undefined {
  if (depth > deepest) return undefined;
  skipSpace(reader);
  const first = reader.text[reader.at];
  switch (first) {
    case "'":
    case '"':
      return parseString(reader, first);
    case '(':
      return parseTuple(reader, depth);
    case '[':
      return parseItems(reader, ']', depth)?.items;
    case '{':
      return parseDict(reader, depth);
    case undefined:
      return undefined;
    default:
      return parseWord(reader);
  }
}

function skipSpace(reader: Reader): void {
  while (/[ \t\r\n]/.test(reader.text[reader.at] ?? '')) reader.at += 1;
}

/** True when the next character is this one, which is then behind us. */
function takes(reader: Reader, character: string): boolean {
  skipSpace(reader);
  if (reader.text[reader.at] !== character) return false;
  reader.at += 1;
  return true;
}

function parseString(reader: Reader, quote: string): string | undefined {
  const start = reader.at + 1;
  for (let at = start; at < reader.text.length; at += 1) {
    const character = reader.text[at];
    // An escape could hide a quote. Names that need one only occur in record arrays, which are refused anyway.
    if (character === '\\' || character === '\n') return undefined;
    if (character === quote) {
      reader.at = at + 1;
      return reader.text.slice(start, at);
    }
  }
  return undefined;
}

/** Words and whole numbers. Python 2 wrote long integers with an L behind them. */
function parseWord(reader: Reader): PythonValue | undefined {
  const word = /^(?:True|False|None|\d{1,40}L?)/.exec(reader.text.slice(reader.at, reader.at + 41))?.[0];
  if (word === undefined) return undefined;
  reader.at += word.length;
  if (word === 'True') return true;
  if (word === 'False') return false;
  if (word === 'None') return null;
  return BigInt(word.replace('L', ''));
}

/** `(3)` is the number 3 in brackets, `(3,)` a tuple. */
function parseTuple(reader: Reader, depth: number): PythonValue | undefined {
  const tuple = parseItems(reader, ')', depth);
  if (tuple === undefined) return undefined;
  return tuple.items.length === 1 && !tuple.comma ? tuple.items[0] : tuple.items;
}

function parseItems(reader: Reader, close: string, depth: number): { items: PythonValue[]; comma: boolean } | undefined {
  reader.at += 1;
  const items: PythonValue[] = [];
  let comma = false;
  while (!takes(reader, close)) {
    if (items.length > 0 && !comma) return undefined;
    const item = parseValue(reader, depth + 1);
    if (item === undefined) return undefined;
    items.push(item);
    comma = takes(reader, ',');
  }
  return { items, comma };
}

function parseDict(reader: Reader, depth: number): ReadonlyMap<string, PythonValue> | undefined {
  reader.at += 1;
  const entries = new Map<string, PythonValue>();
  let comma = true;
  while (!takes(reader, '}')) {
    if (!comma) return undefined;
    const key = parseValue(reader, depth + 1);
    if (typeof key !== 'string' || entries.has(key) || !takes(reader, ':')) return undefined;
    const value = parseValue(reader, depth + 1);
    if (value === undefined) return undefined;
    entries.set(key, value);
    comma = takes(reader, ',');
  }
  return entries;
}
