/** Bundles the server: one file for each process or thread, side by side, so that a thread finds its file. */
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const ENTRIES = { main: 'server/main.ts', 'decode-worker': 'server/jobs/decode-worker.ts' };

/** @param {string} outdir below the root; two folders deep like the sources, since the server looks for files from there */
export async function bundleServer(outdir) {
  await build({
    absWorkingDir: ROOT,
    entryPoints: ENTRIES,
    outdir,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    packages: 'external',
    sourcemap: true,
    tsconfig: 'server/tsconfig.json',
    logLevel: 'warning',
  });
}
