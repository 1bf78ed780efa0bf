/** Builds the client and bundles the server into dist/, and packs what the browser asks for. */
import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { brotliCompressSync, constants, gzipSync } from 'node:zlib';
import { bundleServer } from './bundle-server.mjs';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const PACKED = /\.(js|css|html|svg|json|txt|map)$/;
/** Smaller files are not worth a second copy. */
const LEAST_BYTES = 1024;

function buildClient() {
  if (!existsSync(join(ROOT, 'angular.json'))) return;
  const result = spawnSync(join(ROOT, 'node_modules/.bin/ng'), ['build'], {
    cwd: ROOT,
    stdio: 'inherit',
    env: { ...process.env, NG_CLI_ANALYTICS: 'false' },
  });
  if (result.status !== 0) process.exit(result.status ?? 1);
  pack(join(ROOT, 'dist/client'));
}

function pack(folder) {
  for (const entry of readdirSync(folder, { withFileTypes: true, recursive: true })) {
    const path = join(entry.parentPath ?? entry.path, entry.name);
    if (!entry.isFile() || !PACKED.test(entry.name)) continue;
    const bytes = readFileSync(path);
    if (bytes.length < LEAST_BYTES) continue;
    writeFileSync(
      `${path}.br`,
      brotliCompressSync(bytes, { params: { [constants.BROTLI_PARAM_QUALITY]: 9 } }),
    );
    writeFileSync(`${path}.gz`, gzipSync(bytes, { level: 9 }));
  }
}

rmSync(join(ROOT, 'dist/server'), { recursive: true, force: true });
await bundleServer('dist/server');
buildClient();
