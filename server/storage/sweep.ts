import type { Store } from '../data-source';
import { Blob } from '../entities/blob';
import { Check } from '../entities/check';
import { Decode } from '../entities/decode';
import type { BlobStore } from './blob-store';
import type { ProductStore } from './product-store';

/** Removes files the database does not know: what a crash left between file and row. Run before anything else works on them. */
export async function sweepFiles(store: Store, blobs: BlobStore, products: ProductStore): Promise<void> {
  const known = new Set((await store.reader.find(Blob, { select: { sha256: true } })).map((b) => b.sha256));
  for (const sha256 of await blobs.list()) if (!known.has(sha256)) await blobs.remove(sha256);
  const decodes = await store.reader.find(Decode, { select: { id: true, folder: true } });
  const checks = await store.reader.find(Check, { select: { id: true, folder: true } });
  const folders = new Set([...decodes, ...checks].map(({ folder }) => folder));
  for (const folder of await products.list()) if (!folders.has(folder)) await products.remove(folder);
}
