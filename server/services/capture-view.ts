import type { EntityManager } from 'typeorm';
import { In } from 'typeorm';
import type { Role } from '#shared/contract/http/accounts';
import type { CaptureView } from '#shared/contract/http/captures';
import type { Account } from '../entities/account';
import type { Capture } from '../entities/capture';
import { Check } from '../entities/check';
import { Decode } from '../entities/decode';
import { Job } from '../entities/job';
import { mayTouch } from '../permissions';
import { toPersonRef } from './account-view';
import { numberOf } from './capture-number';
import { toDecodeSummary } from './decode-view';
import type { JobProgress } from './job-view';
import { toJobView } from './job-view';

/** What a view of captures needs beside them. */
interface Company {
  readonly decodes: ReadonlyMap<number, Decode>;
  readonly decodeCounts: ReadonlyMap<number, number>;
  readonly checks: ReadonlyMap<number, Check>;
  readonly jobs: ReadonlyMap<number, Job>;
}

/** Wire forms of captures that were loaded with blob, owner, build and device. */
export async function toCaptureViews(
  reader: EntityManager,
  captures: readonly Capture[],
  viewer: { readonly id: number; readonly role: Role },
  progress: JobProgress,
): Promise<CaptureView[]> {
  const company = await loadCompany(
    reader,
    captures.map(({ id }) => id),
  );
  return captures.map((capture) => toCaptureView(capture, company, viewer, progress));
}

function toCaptureView(
  capture: Capture,
  company: Company,
  viewer: Pick<Account, 'id' | 'role'>,
  progress: JobProgress,
): CaptureView {
  const decode = company.decodes.get(capture.id);
  const job = company.jobs.get(capture.id);
  const isTelling = job !== undefined && job.state !== 'done' && job.state !== 'cancelled';
  const { build } = capture;
  return {
    number: numberOf(capture.id),
    fileName: capture.fileName,
    sha256: capture.sha256,
    size: capture.blob.size,
    owner: toPersonRef(capture.owner),
    device: build === null ? null : { id: build.device.id, name: build.device.name },
    build: build === null ? null : { id: build.id, name: build.name },
    about: capture.about,
    state: capture.state,
    job: isTelling ? toJobView(job, progress) : null,
    decode: decode === undefined ? null : toDecodeSummary(decode, company.checks.get(decode.id)),
    decodes: company.decodeCounts.get(capture.id) ?? 0,
    createdAt: new Date(capture.createdAt).toISOString(),
    mayDelete: mayTouch('DELETE /captures/:number', viewer, capture.ownerId),
  };
}

async function loadCompany(reader: EntityManager, ids: readonly number[]): Promise<Company> {
  const captureId = In([...ids]);
  const latestDecodes = await latestBy(reader, Decode, 'captureId', ids);
  const decodes = await reader.findBy(Decode, { id: In(latestDecodes.map(({ latest }) => latest)) });
  const latestChecks = await latestBy(
    reader,
    Check,
    'decodeId',
    decodes.map(({ id }) => id),
  );
  const checks = await reader.findBy(Check, { id: In(latestChecks.map(({ latest }) => latest)) });
  const latestJobs = await latestBy(reader, Job, 'captureId', ids);
  const jobs = await reader.findBy(Job, { id: In(latestJobs.map(({ latest }) => latest)), captureId });
  return {
    decodes: new Map(decodes.map((decode) => [decode.captureId, decode])),
    decodeCounts: new Map(latestDecodes.map(({ parent, count }) => [parent, count])),
    checks: new Map(checks.map((check) => [check.decodeId, check])),
    jobs: new Map(jobs.map((job) => [job.captureId, job])),
  };
}

/** The highest id of each parent, and how many there are. */
async function latestBy(
  reader: EntityManager,
  entity: typeof Decode | typeof Check | typeof Job,
  parent: 'captureId' | 'decodeId',
  parents: readonly number[],
): Promise<{ parent: number; latest: number; count: number }[]> {
  return reader
    .createQueryBuilder(entity, 'row')
    .select(`row.${parent}`, 'parent')
    .addSelect('MAX(row.id)', 'latest')
    .addSelect('COUNT(*)', 'count')
    .where(`row.${parent} IN (:...parents)`, { parents: parents.length === 0 ? [0] : parents })
    .groupBy(`row.${parent}`)
    .getRawMany();
}
