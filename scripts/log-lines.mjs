/** The log of several programs in one terminal: each line begins with its program's name. */
import pretty from 'pino-pretty';

const COLORS = { web: 36, worker: 35, migrate: 33, seed: 33 };
const NAME_WIDTH = 8;
const isTerminal = process.stdout.isTTY === true;
const asText = pretty.prettyFactory({
  colorize: isTerminal,
  translateTime: 'SYS:HH:MM:ss',
  ignore: 'pid,hostname',
  singleLine: true,
});

/** Prints one line; JSON of the product's own log is made readable. */
export function printLine(name, line) {
  const label = `${name.padEnd(NAME_WIDTH)}|`;
  const prefix = isTerminal ? `\x1b[${COLORS[name] ?? 37}m${label}\x1b[0m` : label;
  const text = line.startsWith('{"level":') ? asText(line).trimEnd() : line;
  process.stdout.write(`${prefix} ${text}\n`);
}
