import { In } from 'typeorm';
import type { JobView } from '#shared/contract/http/jobs';
import type { Store } from '../data-source';
import type { Account } from '../entities/account';
import { Job } from '../entities/job';
import type { JobRunner } from '../jobs/job-runner';
import { audit } from './audit';
import { numberOf } from './capture-number';
import type { JobProgress } from './job-view';
import { toJobView } from './job-view';
import { NotFound } from './service-error';

/** The queue as people see it. */
export class JobService {
  constructor(
    private readonly store: Store,
    private readonly runner: JobRunner,
    private readonly progress: JobProgress,
  ) {}

  /** Own jobs that are not over, the oldest first. */
  async listOpen(accountId: number): Promise<JobView[]> {
    const jobs = await this.store.reader.find(Job, {
      where: { accountId, state: In(['queued', 'running']) },
      order: { id: 'ASC' },
    });
    return jobs.map((job) => toJobView(job, this.progress));
  }

  async view(id: number): Promise<JobView> {
    return toJobView(await this.find(id), this.progress);
  }

  async ownerOf(id: number): Promise<number> {
    return (await this.find(id)).accountId;
  }

  /** A job that is over stays as it is. */
  async cancel(by: Account, id: number): Promise<JobView> {
    const { captureId } = await this.find(id);
    await this.runner.cancel(id);
    await this.store.write((manager) =>
      audit(manager, by, 'job.cancelled', numberOf(captureId), { job: id }),
    );
    return this.view(id);
  }

  private async find(id: number): Promise<Job> {
    const job = await this.store.reader.findOneBy(Job, { id });
    if (job === null) throw new NotFound('This job');
    return job;
  }
}
