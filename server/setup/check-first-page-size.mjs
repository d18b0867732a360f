import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { projectRoot } from './ground.mjs';

/** Compressed JavaScript that the first page may ship, kB. */
const limit = 180;

const folder = join(projectRoot, 'dist', 'client');
const manifest = JSON.parse(readFileSync(join(folder, '.vite', 'manifest.json'), 'utf8'));
const entry = Object.keys(manifest).find((key) => manifest[key].isEntry);

/** A chunk and all that it imports at once; what is imported when needed is not of the first page. */
function collectChunks(key, found = new Set()) {
  if (found.has(key)) return found;
  found.add(key);
  for (const imported of manifest[key].imports ?? []) collectChunks(imported, found);
  return found;
}

const sizes = [...collectChunks(entry)].map((key) => {
  const { file } = manifest[key];
  return { file, size: gzipSync(readFileSync(join(folder, file)), { level: 6 }).length / 1000 };
});
const total = sizes.reduce((sum, { size }) => sum + size, 0);
for (const { file, size } of sizes) console.log(`  ${size.toFixed(1).padStart(6)} kB  ${file}`);
console.log(
  `  ${total.toFixed(1).padStart(6)} kB compressed JavaScript on the first page (limit ${limit} kB)`,
);
process.exitCode = total <= limit ? 0 : 1;
