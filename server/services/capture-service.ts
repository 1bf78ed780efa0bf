import { Mutex } from 'async-mutex';
import type { EntityManager } from 'typeorm';
import type * as z from 'zod';
import type {
  CaptureChange,
  CapturePage,
  captureQuerySchema,
  CaptureView,
  newCaptureSchema,
} from '#shared/contract/http/captures';
import { PAGE_SIZE } from '#shared/contract/http/captures';
import type { Store } from '../data-source';
import type { Account } from '../entities/account';
import { Blob } from '../entities/blob';
import { Build } from '../entities/build';
import { Capture } from '../entities/capture';
import { Check } from '../entities/check';
import { Decode } from '../entities/decode';
import type { BlobStore, ReceivedFile } from '../storage/blob-store';
import type { ProductStore } from '../storage/product-store';
import { audit } from './audit';
import { idOf, numberOf } from './capture-number';
import { countWorkspace, listOwners, queryCaptures, selectCaptures } from './capture-query';
import { toCaptureViews } from './capture-view';
import type { EventHub } from './event-hub';
import type { JobProgress } from './job-view';
import { Invalid, NotFound } from './service-error';

type Viewer = Pick<Account, 'id' | 'role' | 'name'>;

/** Uploads and what is known about them. */
export class CaptureService {
  /** A file must not be removed with its last capture while the same file is being registered again. */
  private readonly blobGate = new Mutex();

  constructor(
    private readonly store: Store,
    private readonly blobs: BlobStore,
    private readonly products: ProductStore,
    private readonly events: EventHub,
    private readonly progress: JobProgress,
  ) {}

  async page(viewer: Viewer, query: z.output<typeof captureQuerySchema>): Promise<CapturePage> {
    const { reader } = this.store;
    const { captures, total } = await queryCaptures(reader, query);
    return {
      total,
      page: query.page,
      pageSize: PAGE_SIZE,
      captures: await toCaptureViews(reader, captures, viewer, this.progress),
      counts: await countWorkspace(reader),
      owners: await listOwners(reader),
    };
  }

  async listOfBuild(viewer: Viewer, buildId: number, most: number): Promise<CaptureView[]> {
    const captures = await selectCaptures(this.store.reader)
      .where('capture.buildId = :buildId', { buildId })
      .orderBy('capture.id', 'DESC')
      .limit(most)
      .getMany();
    return toCaptureViews(this.store.reader, captures, viewer, this.progress);
  }

  async view(viewer: Viewer, number: string): Promise<CaptureView> {
    const capture = await selectCaptures(this.store.reader)
      .where('capture.id = :id', { id: idOf(number) })
      .getOne();
    if (capture === null) throw new NotFound(`Capture ${number}`);
    const [view] = await toCaptureViews(this.store.reader, [capture], viewer, this.progress);
    return view;
  }

  /** With its blob. */
  async find(number: string): Promise<Capture> {
    const capture = await this.store.reader.findOne(Capture, {
      where: { id: idOf(number) },
      relations: { blob: true },
    });
    if (capture === null) throw new NotFound(`Capture ${number}`);
    return capture;
  }

  async ownerOf(number: string): Promise<number> {
    return (await this.find(number)).ownerId;
  }

  /** Makes a capture of a received file. Acknowledged only once file and row are on the disk. */
  async register(
    by: Viewer,
    file: ReceivedFile,
    fileName: string,
    input: z.output<typeof newCaptureSchema>,
  ): Promise<CaptureView> {
    const id = await this.blobGate.runExclusive(async () => {
      await this.blobs.keep(file);
      try {
        return await this.store.write((manager) => insertCapture(manager, by, file, fileName, input));
      } catch (error) {
        await this.removeIfUnknown(file.sha256);
        throw error;
      }
    });
    this.events.publish({ kind: 'capture', number: numberOf(id), change: 'created' });
    return this.view(by, numberOf(id));
  }

  async change(by: Viewer, number: string, input: CaptureChange): Promise<CaptureView> {
    await this.store.write(async (manager) => {
      const id = idOf(number);
      if (!(await manager.existsBy(Capture, { id }))) throw new NotFound(`Capture ${number}`);
      await refuseUnknownBuild(manager, input.buildId);
      await manager.save(Capture, { id, ...input });
      await audit(manager, by, 'capture.changed', number, { ...input });
    });
    this.events.publish({ kind: 'capture', number, change: 'changed' });
    return this.view(by, number);
  }

  /** Its decodes and checks go with it; the file goes with its last capture. */
  async remove(by: Viewer, number: string): Promise<void> {
    await this.blobGate.runExclusive(async () => {
      const { folders, orphan } = await this.store.write((manager) => deleteCapture(manager, by, number));
      // Only now: a crash in between leaves files nobody knows, which the next start removes.
      if (orphan !== null) await this.blobs.remove(orphan);
      for (const folder of folders) await this.products.remove(folder);
    });
    this.events.publish({ kind: 'capture', number, change: 'deleted' });
  }

  private async removeIfUnknown(sha256: string): Promise<void> {
    if (!(await this.store.reader.existsBy(Blob, { sha256 }))) await this.blobs.remove(sha256);
  }
}

async function insertCapture(
  manager: EntityManager,
  by: Viewer,
  { sha256, size }: ReceivedFile,
  fileName: string,
  { about, buildId }: z.output<typeof newCaptureSchema>,
): Promise<number> {
  await refuseUnknownBuild(manager, buildId);
  if (!(await manager.existsBy(Blob, { sha256 }))) {
    await manager.insert(Blob, { sha256, size, createdAt: Date.now() });
  }
  const capture = await manager.save(Capture, {
    fileName,
    sha256,
    ownerId: by.id,
    buildId,
    about,
    state: 'received',
    verdict: null,
    violations: 0,
    durationS: null,
    createdAt: Date.now(),
  });
  await audit(manager, by, 'capture.uploaded', numberOf(capture.id), { fileName, sha256, size });
  return capture.id;
}

async function refuseUnknownBuild(manager: EntityManager, id: number | null | undefined): Promise<void> {
  if (id === null || id === undefined || (await manager.existsBy(Build, { id }))) return;
  throw new Invalid('unknown-build', 'There is no such build.', {
    fields: [{ path: 'buildId', message: 'there is no such build' }],
  });
}

async function deleteCapture(
  manager: EntityManager,
  by: Viewer,
  number: string,
): Promise<{ folders: string[]; orphan: string | null }> {
  const id = idOf(number);
  const capture = await manager.findOneBy(Capture, { id });
  if (capture === null) throw new NotFound(`Capture ${number}`);
  const decodes = await manager.findBy(Decode, { captureId: id });
  const checks = await manager.findBy(Check, { decode: { captureId: id } });
  await manager.delete(Capture, id);
  const { sha256, fileName } = capture;
  const isOrphan = !(await manager.existsBy(Capture, { sha256 }));
  if (isOrphan) await manager.delete(Blob, { sha256 });
  await audit(manager, by, 'capture.deleted', number, { fileName, sha256 });
  return {
    folders: [...new Set([...decodes, ...checks].map(({ folder }) => folder))],
    orphan: isOrphan ? sha256 : null,
  };
}
