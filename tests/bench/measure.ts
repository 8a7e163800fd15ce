/** Runs the benches named on the command line, in order; one JSON object or one line each. */
import { pathToFileURL } from 'node:url';
import { lineOf, median, type Measured, type Report } from './report.js';

const asJson = process.argv.includes('--json');
const measured: Measured[] = [];
const report: Report = (name, ratios, about = {}) => {
  measured.push({ name, ratios, ...about });
  if (!asJson) process.stdout.write(`${lineOf({ name, ratios, ...about })}\n`);
};
for (const path of process.argv.slice(2).filter((argument) => argument.endsWith('.bench.ts'))) {
  const { default: bench } = await import(pathToFileURL(path).href) as { default: (report: Report) => Promise<void> };
  await bench(report);
}
if (asJson) process.stdout.write(`${JSON.stringify(Object.fromEntries(measured.map(({ name, ratios }) => [name, median(ratios)])))}\n`);
