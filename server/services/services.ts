import { join } from 'node:path';
import type { Logger } from 'pino';
import type { Config } from '../config';
import { Store } from '../data-source';
import { JobRunner } from '../jobs/job-runner';
import { WorkerPool } from '../jobs/worker-pool';
import { BlobStore } from '../storage/blob-store';
import { ProductStore } from '../storage/product-store';
import { sweepFiles } from '../storage/sweep';
import { AccountService } from './account-service';
import { CaptureService } from './capture-service';
import { CheckService } from './check-service';
import { DecodeService } from './decode-service';
import { DeviceService } from './device-service';
import type { Download } from './download-service';
import { DownloadService } from './download-service';
import { EventHub } from './event-hub';
import { JobService } from './job-service';
import { JobProgress } from './job-view';
import { MappingService } from './mapping-service';
import { PasswordService } from './password-service';
import { PresetService } from './preset-service';
import { SessionService } from './session-service';
import { TicketService } from './ticket-service';

/** Everything the routes stand on, and how to end it. */
export interface Services {
  readonly store: Store;
  readonly blobs: BlobStore;
  readonly runner: JobRunner;
  readonly events: EventHub;
  readonly accounts: AccountService;
  readonly passwords: PasswordService;
  readonly sessions: SessionService;
  readonly captures: CaptureService;
  readonly decodes: DecodeService;
  readonly checks: CheckService;
  readonly jobs: JobService;
  readonly mappings: MappingService;
  readonly presets: PresetService;
  readonly devices: DeviceService;
  readonly downloads: DownloadService;
  readonly tickets: TicketService<Download>;
  stop(): Promise<void>;
}

export interface ServiceOptions {
  readonly config: Pick<Config, 'dataDir' | 'publicUrl' | 'passwordCost'>;
  readonly tokenKey: string;
  readonly logger: Logger;
  /** Threads that decode from the queue; one more answers those who map lines. */
  readonly threads?: number;
}

const THREADS = 2;

/** Opens the data folder, puts it in order and takes up interrupted jobs. */
export async function openServices(options: ServiceOptions): Promise<Services> {
  const { config, tokenKey, logger } = options;
  const store = await Store.open(join(config.dataDir, 'linewitness.sqlite'));
  const blobs = new BlobStore(config.dataDir);
  const products = new ProductStore(config.dataDir);
  await blobs.prepare();
  await products.prepare();
  await sweepFiles(store, blobs, products);
  const events = new EventHub();
  const progress = new JobProgress();
  const queuePool = new WorkerPool(options.threads ?? THREADS);
  const mappingPool = new WorkerPool(1);
  const runner = new JobRunner(store, blobs, products, queuePool, events, progress, logger);
  const captures = new CaptureService(store, blobs, products, events, progress);
  const decodes = new DecodeService(store, runner, events, progress);
  const presets = new PresetService(store, events);
  const sessions = new SessionService(store, config, tokenKey);
  await sessions.sweep();
  await runner.resume();
  return {
    store,
    blobs,
    runner,
    events,
    accounts: new AccountService(store, events, config),
    passwords: new PasswordService(store, events, config),
    sessions,
    captures,
    decodes,
    checks: new CheckService(store, decodes),
    jobs: new JobService(store, runner, progress),
    mappings: new MappingService(captures, presets, blobs, mappingPool),
    presets,
    devices: new DeviceService(store, events),
    downloads: new DownloadService(store, captures, decodes, blobs, products),
    tickets: new TicketService<Download>(),
    stop: async () => {
      await runner.stop();
      await Promise.all([queuePool.stop(), mappingPool.stop()]);
      await store.close();
    },
  };
}
