// Runs every test/bench/*.bench.ts, prints its table and writes dist/bench/<name>.json.
// `npm run bench -- parse cutting` runs only the files whose names begin with one of the words.
import { mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { setFlagsFromString } from 'node:v8';
import { register } from 'tsx/esm/api';

register();
// Lets the benches collect garbage between runs, so that none pays for the one before.
setFlagsFromString('--expose-gc');

const here = dirname(fileURLToPath(import.meta.url));
const out = join(here, '..', '..', 'dist', 'bench');
const wanted = process.argv.slice(2);
const files = readdirSync(here)
  .filter((file) => file.endsWith('.bench.ts'))
  .filter((file) => wanted.length === 0 || wanted.some((word) => file.startsWith(word)))
  .sort();

mkdirSync(out, { recursive: true });
const machine = { node: process.version, cores: cpus().length, processor: cpus()[0]?.model ?? '' };
console.log(`Node ${machine.node}, ${machine.cores} cores, ${machine.processor}`);

let missed = 0;
for (const file of files) {
  const { bench } = await import(pathToFileURL(join(here, file)).href);
  const table = await bench();
  const name = file.replace(/\.bench\.ts$/, '');
  printTable(table);
  missed += table.targets.filter((target) => !target.met).length;
  writeFileSync(
    join(out, `${name}.json`),
    `${JSON.stringify({ name, machine, ...table }, null, 2)}\n`,
  );
}
console.log(missed === 0 ? '\nEvery target is met.' : `\n${missed} target(s) missed.`);
process.exitCode = missed === 0 ? 0 : 1;

function printTable({ title, columns, rows, targets }) {
  const cells = [columns, ...rows.map((row) => row.map((value) => format(value)))];
  const widths = columns.map((_, column) => Math.max(...cells.map((row) => row[column].length)));
  const line = (row) =>
    row
      .map((cell, column) =>
        column === 0 ? cell.padEnd(widths[0]) : cell.padStart(widths[column]),
      )
      .join('  ');
  console.log(`\n${title}`);
  console.log(line(columns));
  console.log(widths.map((width) => '─'.repeat(width)).join('  '));
  for (const row of cells.slice(1)) console.log(line(row));
  for (const { what, measured, limit, met } of targets) {
    console.log(`${met ? 'met' : 'MISSED'}: ${what}: ${format(measured)} (limit ${format(limit)})`);
  }
}

function format(value) {
  if (typeof value !== 'number') return String(value);
  if (Number.isInteger(value)) return value.toLocaleString('en');
  if (value !== 0 && Math.abs(value) < 1e-3) return value.toExponential(1);
  return value >= 100 ? value.toFixed(0) : value.toPrecision(3);
}
