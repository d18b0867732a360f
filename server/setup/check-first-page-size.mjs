import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { projectRoot } from './ground.mjs';

/** Compressed JavaScript that a page may ship before it is used, kB. */
const pages = [
  { name: 'the first page', manifest: 'manifest.json', limit: 180 },
  { name: 'the grower copy', manifest: 'copy-manifest.json', limit: 90 },
];

const folder = join(projectRoot, 'dist', 'client');

/** A chunk and all that it imports at once; what is imported when needed is not of the first page. */
function collectChunks(manifest, key, found = new Set()) {
  if (found.has(key)) return found;
  found.add(key);
  for (const imported of manifest[key].imports ?? []) collectChunks(manifest, imported, found);
  return found;
}

function checkPage({ name, manifest: file, limit }) {
  const manifest = JSON.parse(readFileSync(join(folder, '.vite', file), 'utf8'));
  const entry = Object.keys(manifest).find(
    (key) => manifest[key].isEntry && manifest[key].file.endsWith('.js'),
  );
  const sizes = [...collectChunks(manifest, entry)].map((key) => {
    const { file } = manifest[key];
    return { file, size: gzipSync(readFileSync(join(folder, file)), { level: 6 }).length / 1000 };
  });
  const total = sizes.reduce((sum, { size }) => sum + size, 0);
  for (const { file, size } of sizes) console.log(`  ${size.toFixed(1).padStart(6)} kB  ${file}`);
  console.log(`  ${total.toFixed(1).padStart(6)} kB compressed JavaScript on ${name} (limit ${limit} kB)`);
  return total <= limit;
}

process.exitCode = pages.map(checkPage).every(Boolean) ? 0 : 1;
