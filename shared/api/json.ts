/** JSON as the standard has it (RFC 8259), with the place and the reason when it is not. */

export interface JsonPosition {
  offset: number;
  line: number;
  column: number;
}
export type ParsedJson = { ok: true; value: unknown } | { ok: false; message: string; position: JsonPosition };

const MAX_DEPTH = 500;
const NUMBER = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
const WORD = /[A-Za-z_$][\w$]*/y;
const NOT_NUMBERS = /-?(?:NaN|Infinity|inf|nan)\b/y;

class Refused extends Error {
  readonly offset: number;
  constructor(offset: number, message: string) {
    super(message);
    this.offset = offset;
  }
}

function match(pattern: RegExp, text: string, at: number): string | null {
  pattern.lastIndex = at;
  return pattern.exec(text)?.[0] ?? null;
}

const skip = (text: string, at: number): number => {
  let i = at;
  while (i < text.length && " \t\n\r".includes(text[i])) i++;
  return i;
};

const found = (text: string, at: number): string => (at >= text.length ? "the text ends here" : `found ${JSON.stringify(text[at])}`);

function string(text: string, from: number): number {
  for (let i = from + 1; i < text.length; i++) {
    const code = text.charCodeAt(i);
    if (code === 0x22) return i + 1;
    if (code < 0x20) throw new Refused(i, "a line break or control character inside a string has to be written as an escape such as \\n");
    if (code !== 0x5c) continue;
    i++;
    if (text[i] === "u") {
      if (!/^[0-9a-fA-F]{4}$/.test(text.slice(i + 1, i + 5))) throw new Refused(i - 1, "\\u needs four hexadecimal digits");
      i += 4;
    } else if (i >= text.length || !'"\\/bfnrt'.includes(text[i])) throw new Refused(i - 1, "this is not an escape that JSON knows");
  }
  throw new Refused(from, "this string is not closed");
}

function scalar(text: string, at: number): number {
  const word = match(NOT_NUMBERS, text, at);
  if (word) throw new Refused(at, `${word} is not a number in JSON; every value has to be a finite number`);
  const number = match(NUMBER, text, at);
  if (number) {
    const end = at + number.length;
    if (/[\d.]/.test(text[end] ?? "")) throw new Refused(at, "this is not how JSON writes a number");
    return end;
  }
  const name = match(WORD, text, at);
  if (name === "true" || name === "false" || name === "null") return at + name.length;
  if (name) throw new Refused(at, `${name} is not a value; text stands in double quotes`);
  throw new Refused(at, `a value is expected, ${found(text, at)}`);
}

function value(text: string, from: number, depth: number): number {
  if (depth > MAX_DEPTH) throw new Refused(from, `brackets are nested more than ${MAX_DEPTH} deep`);
  const open = text[from];
  if (open === '"') return string(text, from);
  if (open !== "{" && open !== "[") return scalar(text, from);
  const close = open === "{" ? "}" : "]";
  let at = skip(text, from + 1);
  if (text[at] === close) return at + 1;
  for (;;) {
    if (open === "{") {
      if (text[at] !== '"') throw new Refused(at, `a field name in double quotes is expected, ${found(text, at)}`);
      at = skip(text, string(text, at));
      if (text[at] !== ":") throw new Refused(at, `a colon is expected after the field name, ${found(text, at)}`);
      at = skip(text, at + 1);
    }
    at = skip(text, value(text, at, depth + 1));
    if (text[at] === close) return at + 1;
    if (text[at] !== ",") throw new Refused(at, `a comma or ${close} is expected, ${found(text, at)}`);
    at = skip(text, at + 1);
    if (text[at] === close) throw new Refused(at, `no comma before ${close} in JSON`);
  }
}

function positionOf(text: string, offset: number): JsonPosition {
  const before = text.slice(0, offset).split(/\r\n|\r|\n/);
  return { offset, line: before.length, column: before[before.length - 1].length + 1 };
}

/** Where and why a text is not JSON. */
function refusal(text: string): Refused {
  try {
    const end = skip(text, value(text, skip(text, 0), 0));
    return new Refused(end, `nothing is expected after the value, ${found(text, end)}`);
  } catch (error) {
    if (error instanceof Refused) return error;
    throw error;
  }
}

/** Where brackets of a valid text are nested too deep for anything recursive that comes after; -1 when nowhere. */
function tooDeepAt(text: string): number {
  let depth = 0;
  let quoted = false;
  for (let i = 0; i < text.length; i++) {
    const code = text.charCodeAt(i);
    if (quoted) {
      if (code === 0x5c) i++;
      else if (code === 0x22) quoted = false;
    } else if (code === 0x22) quoted = true;
    else if (code === 0x5b || code === 0x7b) {
      if (++depth > MAX_DEPTH) return i;
    } else if (code === 0x5d || code === 0x7d) depth--;
  }
  return -1;
}

export function parseJson(input: string): ParsedJson {
  const text = input.startsWith("\ufeff") ? input.slice(1) : input;
  try {
    const parsed: unknown = JSON.parse(text);
    if (tooDeepAt(text) === -1) return { ok: true, value: parsed };
    throw new SyntaxError("nested too deep");
  } catch {
    const { offset, message } = refusal(text);
    const position = positionOf(text, offset);
    return { ok: false, message: `This is not JSON: line ${position.line}, column ${position.column}: ${message}.`, position };
  }
}
