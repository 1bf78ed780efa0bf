import type { Logger } from 'pino';
import type { EntityManager } from 'typeorm';
import type { JobProblem } from '#shared/contract/http/jobs';
import type { Store } from '../data-source';
import { Decode } from '../entities/decode';
import { Job } from '../entities/job';
import type { EventHub } from '../services/event-hub';
import type { JobProgress } from '../services/job-view';
import { toJobView } from '../services/job-view';
import type { BlobStore } from '../storage/blob-store';
import type { ProductStore } from '../storage/product-store';
import { endJob, settleJob, updateCaptureState } from './settle-job';
import type { PoolTask, WorkerPool } from './worker-pool';

/** Times a job is begun: once, and once more after a crash. */
export const MOST_ATTEMPTS = 2;
/** A thread that says nothing for so long is given up. */
const LONGEST_SILENCE_MS = 10 * 60_000;
const TELL_EVERY_MS = 200;

const CRASHED: JobProblem = {
  code: 'crashed',
  detail: 'The decode broke off twice without a result. The file is kept; please report it.',
  place: null,
  excerpt: null,
};

interface Running {
  readonly abort: AbortController;
  lastSign: number;
  lastTold: number;
}

/** Works through the durable queue of jobs. A job that crashes its thread never takes the server along. */
export class JobRunner {
  private readonly running = new Map<number, Running>();
  private readonly works = new Set<Promise<void>>();
  private readonly watch: NodeJS.Timeout;
  private isStopping = false;
  private filling: Promise<void> = Promise.resolve();

  constructor(
    private readonly store: Store,
    private readonly blobs: BlobStore,
    private readonly products: ProductStore,
    private readonly pool: WorkerPool,
    private readonly events: EventHub,
    private readonly progress: JobProgress,
    private readonly logger: Logger,
  ) {
    this.watch = setInterval(() => this.giveUpSilent(), 30_000);
    this.watch.unref();
  }

  /** Takes up what a stop or a crash left behind. */
  async resume(): Promise<void> {
    await this.store.write(async (manager) => {
      for (const job of await manager.findBy(Job, { state: 'running' })) await giveBack(manager, job);
    });
    this.wake();
  }

  /** Looks for queued jobs. */
  wake(): void {
    this.filling = this.filling
      .then(() => this.fill())
      .catch((error: unknown) => this.logger.error({ err: error }, 'the queue of jobs could not be read'));
  }

  /** Ends a queued or running job. A job that is over stays as it is. */
  async cancel(jobId: number): Promise<void> {
    const job = await this.store.write((manager) => endJob(manager, jobId, 'cancelled', null));
    // Only now: work that breaks off before its row says why would be begun again.
    this.running.get(jobId)?.abort.abort();
    if (job !== null) this.tell(job);
  }

  /** Ends the work of jobs whose capture is about to be deleted. */
  async cancelOf(captureId: number): Promise<void> {
    const jobs = await this.store.reader.findBy(Job, { captureId });
    for (const job of jobs) if (job.state === 'queued' || job.state === 'running') await this.cancel(job.id);
  }

  /** Running jobs go back to the queue, as if they had not been begun. */
  async stop(): Promise<void> {
    this.isStopping = true;
    clearInterval(this.watch);
    await this.filling;
    for (const { abort } of this.running.values()) abort.abort();
    await Promise.all(this.works);
  }

  /** Resolves once nothing is queued or running: for tests and the demo. */
  async whenIdle(): Promise<void> {
    for (;;) {
      await this.filling;
      if (this.works.size === 0) return;
      await Promise.race(this.works);
    }
  }

  private async fill(): Promise<void> {
    while (!this.isStopping && this.running.size < this.pool.threads) {
      const job = await this.store.write(takeNext);
      if (job === null) return;
      this.running.set(job.id, { abort: new AbortController(), lastSign: Date.now(), lastTold: 0 });
      this.tell(job);
      const work = this.work(job);
      this.works.add(work);
      void work.finally(() => this.works.delete(work));
    }
  }

  private async work(job: Job): Promise<void> {
    const { abort } = this.running.get(job.id)!;
    try {
      const task = await this.taskOf(job);
      const answer = await this.pool.run(task, {
        signal: abort.signal,
        onPercent: (percent) => this.note(job, percent),
      });
      if (answer.kind === 'problem') await this.end(job, answer.problem);
      else if (answer.kind === 'judged') await this.settle(job, answer);
    } catch (error) {
      await this.recover(job, error);
    } finally {
      await this.products.discardDraft(this.products.folderOf(job.id));
      this.running.delete(job.id);
      this.progress.forget(job.id);
      this.wake();
    }
  }

  private async taskOf(job: Job): Promise<PoolTask> {
    const { capture, task } = job;
    const file = {
      path: this.blobs.pathOf(capture.sha256),
      name: capture.fileName,
      sha256: capture.sha256,
      size: capture.blob.size,
    };
    const draft = this.products.draftOf(this.products.folderOf(job.id));
    if (task.kind === 'decode') {
      return { kind: 'decode', file, draft, request: task.request, rulebook: task.request.rulebook };
    }
    const { request } = await this.store.reader.findOneByOrFail(Decode, { id: task.decodeId });
    return { kind: 'check', file, draft, request, rulebook: task.rulebook };
  }

  private async settle(job: Job, answer: Parameters<typeof settleJob>[2]): Promise<void> {
    const folder = this.products.folderOf(job.id);
    // Files first: rows must never name what is not there.
    await this.products.publish(folder);
    const settled = await this.store.write((manager) => settleJob(manager, job, answer, folder));
    if (settled === null) await this.products.remove(folder);
    else this.tell(settled);
  }

  private async end(job: Job, problem: JobProblem): Promise<void> {
    const ended = await this.store.write((manager) => endJob(manager, job.id, 'failed', problem));
    if (ended !== null) this.tell(ended);
  }

  /** The thread crashed, ran out of memory, fell silent, or was ended by us. */
  private async recover(job: Job, error: unknown): Promise<void> {
    const after = await this.store.write(async (manager) => {
      const fresh = await manager.findOneBy(Job, { id: job.id, state: 'running' });
      // Cancelled, or deleted with its capture.
      if (fresh === null) return null;
      if (this.isStopping) return giveBack(manager, { ...fresh, attempts: fresh.attempts - 1 });
      this.logger.error({ err: error, job: job.id, attempts: fresh.attempts }, 'a job broke off');
      return giveBack(manager, fresh);
    });
    if (after !== null) this.tell(after);
  }

  private note(job: Job, percent: number): void {
    const entry = this.running.get(job.id);
    if (entry === undefined || entry.abort.signal.aborted) return;
    const now = Date.now();
    entry.lastSign = now;
    this.progress.set(job.id, percent);
    if (now - entry.lastTold < TELL_EVERY_MS) return;
    entry.lastTold = now;
    this.tell(job);
  }

  private giveUpSilent(): void {
    const oldest = Date.now() - LONGEST_SILENCE_MS;
    for (const { lastSign, abort } of this.running.values()) if (lastSign < oldest) abort.abort();
  }

  private tell(job: Job): void {
    this.events.publish({ kind: 'job', job: toJobView(job, this.progress) });
  }
}

/** The oldest queued job, now running; with its capture and blob. */
async function takeNext(manager: EntityManager): Promise<Job | null> {
  const job = await manager.findOne(Job, {
    where: { state: 'queued' },
    order: { id: 'ASC' },
    relations: { capture: { blob: true } },
  });
  if (job === null) return null;
  const attempts = job.attempts + 1;
  await manager.update(Job, job.id, { state: 'running', attempts });
  await updateCaptureState(manager, job.captureId);
  return { ...job, state: 'running', attempts };
}

/** Puts a job that broke off back into the queue, or gives it up. */
async function giveBack(manager: EntityManager, job: Job): Promise<Job | null> {
  if (job.attempts >= MOST_ATTEMPTS) return endJob(manager, job.id, 'failed', CRASHED);
  await manager.update(Job, job.id, { state: 'queued', attempts: Math.max(0, job.attempts) });
  await updateCaptureState(manager, job.captureId);
  return { ...job, state: 'queued' };
}
