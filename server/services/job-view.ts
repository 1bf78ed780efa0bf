import type { JobView } from '#shared/contract/http/jobs';
import type { Job } from '../entities/job';
import { numberOf } from './capture-number';

/** How far running jobs are, percent by id. */
export class JobProgress {
  private readonly percents = new Map<number, number>();

  of(job: Pick<Job, 'id' | 'state'>): number {
    return job.state === 'done' ? 100 : (this.percents.get(job.id) ?? 0);
  }

  set(jobId: number, percent: number): void {
    this.percents.set(jobId, percent);
  }

  forget(jobId: number): void {
    this.percents.delete(jobId);
  }
}

/** The wire form of a job. */
export function toJobView(job: Omit<Job, 'capture' | 'account'>, progress: JobProgress): JobView {
  return {
    id: job.id,
    capture: numberOf(job.captureId),
    kind: job.task.kind,
    state: job.state,
    percent: progress.of(job),
    decodeId: job.decodeId,
    checkId: job.checkId,
    problem: job.problem,
    createdAt: new Date(job.createdAt).toISOString(),
  };
}
