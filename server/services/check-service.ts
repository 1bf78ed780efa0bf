import { LessThan } from 'typeorm';
import type { CheckChanges, CheckSummary, CheckView } from '#shared/contract/http/checks';
import type { Store } from '../data-source';
import { Check } from '../entities/check';
import { compareChecks } from './compare-checks';
import { toCheckSummary, toCheckView } from './check-view';
import type { DecodeService } from './decode-service';
import { Invalid, NotFound } from './service-error';

/** Checks and what changed between them. */
export class CheckService {
  constructor(
    private readonly store: Store,
    private readonly decodes: DecodeService,
  ) {}

  async listOf(decodeId: number): Promise<CheckSummary[]> {
    await this.decodes.find(decodeId);
    const checks = await this.store.reader.find(Check, { where: { decodeId }, order: { id: 'DESC' } });
    return checks.map(toCheckSummary);
  }

  async view(id: number): Promise<CheckView> {
    return toCheckView(await this.load(id));
  }

  /** @param fromId the check to compare with; the one before of the same capture if left out */
  async changes(id: number, fromId: number | undefined): Promise<CheckChanges> {
    const to = await this.load(id);
    const from = fromId === undefined ? await this.loadBefore(to) : await this.load(fromId);
    if (from !== null && from.decode.captureId !== to.decode.captureId) {
      throw new Invalid('other-capture', 'The two checks are of different captures.', {
        fields: [{ path: 'from', message: 'of another capture' }],
      });
    }
    return compareChecks(from, to);
  }

  private async loadBefore({ id, decode }: Check): Promise<Check | null> {
    const before = await this.store.reader.findOne(Check, {
      where: { id: LessThan(id), decode: { captureId: decode.captureId } },
      order: { id: 'DESC' },
    });
    return before === null ? null : this.load(before.id);
  }

  /** With decode and detail. */
  private async load(id: number): Promise<Check> {
    const check = await this.store.reader
      .createQueryBuilder(Check, 'check')
      .addSelect('check.detail')
      .innerJoinAndSelect('check.decode', 'decode')
      .where('check.id = :id', { id })
      .getOne();
    if (check === null) throw new NotFound('This check');
    return check;
  }
}
