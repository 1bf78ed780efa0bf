import { mkdir, readdir, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { flush } from './flush';

/** What a job may leave behind. */
export type ProductName = 'tape.bin' | 'packets.csv' | 'result.json' | 'log.txt';

/** Folders of products below the data folder, one a job. A folder appears whole or not at all. */
export class ProductStore {
  constructor(private readonly dataDir: string) {}

  async prepare(): Promise<void> {
    await mkdir(this.root, { recursive: true, mode: 0o700 });
  }

  /** Name of a job's folder, as the database keeps it. */
  folderOf(jobId: number): string {
    return String(jobId);
  }

  /** Where a worker writes before the folder is published. */
  draftOf(folder: string): string {
    return join(this.root, `${folder}.draft`);
  }

  pathOf(folder: string, product: ProductName): string {
    return join(this.root, folder, product);
  }

  async publish(folder: string): Promise<void> {
    await rm(join(this.root, folder), { recursive: true, force: true });
    await rename(this.draftOf(folder), join(this.root, folder));
    await flush(this.root);
  }

  async remove(folder: string): Promise<void> {
    await rm(join(this.root, folder), { recursive: true, force: true });
  }

  async discardDraft(folder: string): Promise<void> {
    await rm(this.draftOf(folder), { recursive: true, force: true });
  }

  /** Every folder there is, drafts included. */
  async list(): Promise<string[]> {
    return readdir(this.root);
  }

  private get root(): string {
    return join(this.dataDir, 'products');
  }
}
