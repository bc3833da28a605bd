/**
 * A small assembler for WebAssembly with 128-bit vectors (W3C, WebAssembly Core Specification 2.0, chapter 5): code is
 * built from expressions, each a list of bytes that leaves one value on the stack, or a statement that leaves none.
 */

/** The bytes of an expression or a statement. */
export type Code = readonly number[];

/** Types of values. */
export const valueType = { i32: 0x7f, f64: 0x7c, v128: 0x7b } as const;
type ValueType = (typeof valueType)[keyof typeof valueType];

/** An unsigned number in LEB128. */
function unsigned(value: number): Code {
  return value < 128 ? [value] : [(value & 127) | 128, ...unsigned(value >>> 7)];
}

/** A signed number in LEB128. */
function signed(value: number): Code {
  const rest = value >> 7;
  const last = (rest === 0 && (value & 64) === 0) || (rest === -1 && (value & 64) !== 0);
  return last ? [value & 127] : [(value & 127) | 128, ...signed(rest)];
}

const float = (value: number): Code => [...new Uint8Array(Float64Array.of(value).buffer)];

const binary =
  (...operation: Code) =>
  (a: Code, b: Code): Code => [...a, ...b, ...operation];

/** Alignment exponent and constant offset of a memory access. */
const access = (offset: number): Code => [3, ...unsigned(offset)];

/** Integers: addresses and counters. */
export const i32 = {
  constant: (value: number): Code => [0x41, ...signed(value)],
  load: (address: Code, offset = 0): Code => [...address, 0x28, 2, ...unsigned(offset)],
  add: binary(0x6a),
  lessThan: binary(0x49),
};

/** Single floating-point numbers. */
export const f64 = {
  load: (address: Code): Code => [...address, 0x2b, ...access(0)],
  store: (address: Code, value: Code): Code => [...address, ...value, 0x39, ...access(0)],
  add: binary(0xa0),
};

/** Pairs of floating-point numbers. */
export const f64x2 = {
  constant: (value: number): Code => [0xfd, 0x0c, ...float(value), ...float(value)],
  load: (address: Code, offset = 0): Code => [...address, 0xfd, 0x00, ...access(offset)],
  /** One number from memory in both lanes. */
  loadSplat: (address: Code): Code => [...address, 0xfd, 0x0a, ...access(0)],
  /** Two numbers from two places. */
  gather: (first: Code, second: Code): Code => [
    ...second,
    ...[...first, 0xfd, 0x5d, ...access(0)],
    ...[0xfd, 0x57, ...access(0), 1],
  ],
  store: (address: Code, value: Code): Code => [...address, ...value, 0xfd, 0x0b, ...access(0)],
  add: binary(0xfd, 0xf0, 0x01),
  subtract: binary(0xfd, 0xf1, 0x01),
  multiply: binary(0xfd, 0xf2, 0x01),
  divide: binary(0xfd, 0xf3, 0x01),
  largest: binary(0xfd, 0xf5, 0x01),
  squareRoot: (a: Code): Code => [...a, 0xfd, 0xef, 0x01],
  absolute: (a: Code): Code => [...a, 0xfd, 0xec, 0x01],
  /** Lane by lane: `chosen` where a < b, `other` elsewhere. */
  whereLess: (a: Code, b: Code, chosen: Code, other: Code): Code => [
    ...chosen,
    ...other,
    ...[...a, ...b, 0xfd, 0x49],
    ...[0xfd, 0x52],
  ],
  lane: (a: Code, lane: number): Code => [...a, 0xfd, 0x21, lane],
};

/** A local variable: `get` reads it, `set` writes it. */
export interface Local {
  readonly get: Code;
  set(value: Code): Code;
}

/** Runs `body` once where `condition` holds. */
export function when(condition: Code, body: Code): Code {
  return [...condition, 0x04, 0x40, ...body, 0x0b];
}

/** Repeats `body` while `condition` holds after it: the body always runs once. */
export function repeatWhile(body: Code, condition: Code): Code {
  return [0x03, 0x40, ...body, ...condition, 0x0d, 0, 0x0b];
}

/** The locals of one function in the making. */
export interface Frame {
  parameter(type: ValueType): Local;
  local(type: ValueType): Local;
}

/**
 * The bytes of a module with one memory, imported as `engine.memory`, and one exported function `run`. `build` declares
 * parameters first, then locals, and returns the function's code, which leaves a value of `result`.
 */
export function assembleModule(
  result: ValueType,
  build: (frame: Frame) => Code,
): Uint8Array<ArrayBuffer> {
  const parameters: ValueType[] = [];
  const locals: ValueType[] = [];
  const declare = (types: ValueType[]) => (type: ValueType) => {
    const index = unsigned(parameters.length + locals.length);
    types.push(type);
    return {
      get: [0x20, ...index],
      set: (value: Code) => [...value, 0x21, ...index],
    };
  };
  const code = build({ parameter: declare(parameters), local: declare(locals) });
  const body = [...vector(locals.map((type) => [1, type])), ...code, 0x0b];
  return Uint8Array.from([
    ...[0x00, 0x61, 0x73, 0x6d, 0x01, 0x00, 0x00, 0x00],
    ...section(1, [[0x60, ...vector(parameters.map((type) => [type])), 1, result]]),
    ...section(2, [[...name('engine'), ...name('memory'), 0x02, 0x00, 1]]),
    ...section(3, [[0]]),
    ...section(7, [[...name('run'), 0x00, 0]]),
    ...section(10, [[...unsigned(body.length), ...body]]),
  ]);
}

function vector(items: readonly Code[]): Code {
  return [...unsigned(items.length), ...items.flat()];
}

function section(id: number, items: readonly Code[]): Code {
  const content = vector(items);
  return [id, ...unsigned(content.length), ...content];
}

function name(text: string): Code {
  return vector([...text].map((letter) => [letter.charCodeAt(0)]));
}
