import type * as z from 'zod';
import type {
  BatchAnswer,
  batchDecodeSchema,
  DecodeRequest,
  DecodeView,
} from '#shared/contract/http/decodes';
import type { JobView } from '#shared/contract/http/jobs';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import type { Store } from '../data-source';
import type { Account } from '../entities/account';
import { Capture } from '../entities/capture';
import { Check } from '../entities/check';
import { Decode } from '../entities/decode';
import type { JobTask } from '../entities/job';
import { Job } from '../entities/job';
import type { JobRunner } from '../jobs/job-runner';
import { updateCaptureState } from '../jobs/settle-job';
import { audit } from './audit';
import { idOf, numberOf } from './capture-number';
import { toDecodeView } from './decode-view';
import type { EventHub } from './event-hub';
import type { JobProgress } from './job-view';
import { toJobView } from './job-view';
import { NotFound } from './service-error';

type Person = Pick<Account, 'id' | 'name'>;

/** Decodes, and the jobs that make them. */
export class DecodeService {
  constructor(
    private readonly store: Store,
    private readonly runner: JobRunner,
    private readonly events: EventHub,
    private readonly progress: JobProgress,
  ) {}

  async ask(by: Person, number: string, request: DecodeRequest): Promise<JobView> {
    return this.enqueue(by, idOf(number), { kind: 'decode', request });
  }

  /** One map for many captures. Those that are not there are told, the others are begun. */
  async askMany(
    by: Person,
    { numbers, ...request }: z.output<typeof batchDecodeSchema>,
  ): Promise<BatchAnswer> {
    const jobs: JobView[] = [];
    const refused: BatchAnswer['refused'] = [];
    for (const number of new Set(numbers)) {
      try {
        jobs.push(await this.ask(by, number, request));
      } catch (error) {
        if (!(error instanceof NotFound)) throw error;
        const type = `urn:linewitness:problem:${error.code}`;
        const { status, code, message: detail } = error;
        refused.push({ number, problem: { type, title: 'Not found', status, detail, code } });
      }
    }
    return { jobs, refused };
  }

  async askForCheck(by: Person, decodeId: number, rulebook: RulebookKey): Promise<JobView> {
    const { captureId } = await this.find(decodeId);
    return this.enqueue(by, captureId, { kind: 'check', decodeId, rulebook });
  }

  async listOf(number: string): Promise<DecodeView[]> {
    const captureId = idOf(number);
    if (!(await this.store.reader.existsBy(Capture, { id: captureId }))) {
      throw new NotFound(`Capture ${number}`);
    }
    const decodes = await this.select().where('decode.captureId = :captureId', { captureId }).getMany();
    return Promise.all(decodes.map((decode) => this.toView(decode)));
  }

  async view(id: number): Promise<DecodeView> {
    const decode = await this.select().where('decode.id = :id', { id }).getOne();
    if (decode === null) throw new NotFound('This decode');
    return this.toView(decode);
  }

  async find(id: number): Promise<Decode> {
    const decode = await this.store.reader.findOneBy(Decode, { id });
    if (decode === null) throw new NotFound('This decode');
    return decode;
  }

  /** The check a product is wanted of; the latest if none is named. */
  async findCheck(decodeId: number, checkId: number | undefined): Promise<Check> {
    await this.find(decodeId);
    const check = await this.store.reader.findOne(Check, {
      where: { decodeId, ...(checkId === undefined ? {} : { id: checkId }) },
      order: { id: 'DESC' },
    });
    if (check === null) throw new NotFound('This check');
    return check;
  }

  private async toView(decode: Decode): Promise<DecodeView> {
    const checks = await this.store.reader.find(Check, {
      where: { decodeId: decode.id },
      order: { id: 'DESC' },
    });
    return toDecodeView(decode, checks);
  }

  private select() {
    return this.store.reader
      .createQueryBuilder(Decode, 'decode')
      .addSelect('decode.detail')
      .innerJoinAndSelect('decode.account', 'account')
      .orderBy('decode.id', 'DESC');
  }

  private async enqueue(by: Person, captureId: number, task: JobTask): Promise<JobView> {
    const job = await this.store.write(async (manager) => {
      if (!(await manager.existsBy(Capture, { id: captureId }))) {
        throw new NotFound(`Capture ${numberOf(captureId)}`);
      }
      const made = await manager.save(Job, {
        captureId,
        task,
        state: 'queued',
        attempts: 0,
        problem: null,
        decodeId: null,
        checkId: null,
        accountId: by.id,
        createdAt: Date.now(),
      });
      await updateCaptureState(manager, captureId);
      await audit(manager, by, `${task.kind}.asked`, numberOf(captureId), { job: made.id });
      return made;
    });
    const view = toJobView(job, this.progress);
    this.events.publish({ kind: 'job', job: view });
    this.runner.wake();
    return view;
  }
}
