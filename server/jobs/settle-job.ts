import type { EntityManager } from 'typeorm';
import type { CaptureState } from '#shared/contract/http/captures';
import type { JobProblem } from '#shared/contract/http/jobs';
import { Capture } from '../entities/capture';
import { Check } from '../entities/check';
import { Decode } from '../entities/decode';
import { Job } from '../entities/job';
import type { WorkerAnswer } from './worker-task';

type Judged = Extract<WorkerAnswer, { kind: 'judged' }>;

/** Writes down what a job came to. null where nobody waits for it any more: cancelled, or gone with its capture. */
export async function settleJob(
  manager: EntityManager,
  { id }: Pick<Job, 'id'>,
  { decode, check }: Judged,
  folder: string,
): Promise<Job | null> {
  const job = await manager.findOneBy(Job, { id });
  if (job?.state !== 'running') return null;
  const decodeId =
    job.task.kind === 'check' ? job.task.decodeId : await insertDecode(manager, job, decode, folder);
  const { id: checkId } = await manager.save(Check, {
    decodeId,
    rulebook: check.rulebook.key,
    rulebookName: check.rulebook.name,
    rulebookVersion: check.rulebook.version,
    verdict: check.verdict,
    figures: check.figures,
    detail: check.detail,
    folder,
    createdAt: Date.now(),
  });
  await manager.update(Job, id, { state: 'done', decodeId, checkId });
  await updateCaptureState(manager, job.captureId);
  await updateVerdict(manager, job.captureId);
  return { ...job, state: 'done', decodeId, checkId };
}

/** Ends a job without a result; null where it is over already. */
export async function endJob(
  manager: EntityManager,
  id: number,
  state: 'failed' | 'cancelled',
  problem: JobProblem | null,
): Promise<Job | null> {
  const job = await manager.findOneBy(Job, { id });
  if (job === null || (job.state !== 'queued' && job.state !== 'running')) return null;
  const ended: Job = { ...job, state, problem };
  await manager.save(Job, { id, state, problem });
  await updateCaptureState(manager, job.captureId);
  return ended;
}

async function insertDecode(
  manager: EntityManager,
  job: Job,
  { figures, detail, toolVersion }: Judged['decode'],
  folder: string,
): Promise<number> {
  if (job.task.kind !== 'decode') throw new Error('only a decode job makes a decode');
  const { captureId, accountId } = job;
  const ordinal = (await manager.maximum(Decode, 'ordinal', { captureId })) ?? 0;
  const decode = await manager.save(Decode, {
    captureId,
    ordinal: ordinal + 1,
    request: job.task.request,
    figures,
    detail,
    folder,
    toolVersion,
    accountId,
    createdAt: Date.now(),
  });
  return decode.id;
}

/** The state of a capture follows from its decode jobs. */
export async function updateCaptureState(manager: EntityManager, captureId: number): Promise<void> {
  const jobs = (await manager.findBy(Job, { captureId })).filter(({ task }) => task.kind === 'decode');
  const states = new Set(jobs.map(({ state }) => state));
  const hasDecode = await manager.existsBy(Decode, { captureId });
  const latest = jobs.reduce<Job | null>(
    (best, job) => (best === null || job.id > best.id ? job : best),
    null,
  );
  let state: CaptureState = hasDecode ? 'decoded' : latest?.state === 'failed' ? 'failed' : 'received';
  if (states.has('running')) state = 'running';
  else if (states.has('queued')) state = 'queued';
  await manager.update(Capture, captureId, { state });
}

/** Lists show the latest check of the latest decode. */
async function updateVerdict(manager: EntityManager, captureId: number): Promise<void> {
  const decode = await manager.findOne(Decode, { where: { captureId }, order: { id: 'DESC' } });
  if (decode === null) return;
  const check = await manager.findOne(Check, { where: { decodeId: decode.id }, order: { id: 'DESC' } });
  await manager.update(Capture, captureId, {
    verdict: check?.verdict ?? null,
    violations: check?.figures.counts.violation ?? 0,
    durationS: decode.figures.durationS,
  });
}
