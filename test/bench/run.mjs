/** Runs every bench of this folder, one after the other; needs `npm run build` first. Read the ratios: times are of
 *  this machine at this moment. */
import { readdirSync } from 'node:fs';

const folder = new URL('.', import.meta.url);
for (const file of readdirSync(folder)
  .filter((name) => name.endsWith('.bench.mjs'))
  .sort()) {
  console.log(`\n${file}`);
  await import(new URL(file, folder).href);
}
