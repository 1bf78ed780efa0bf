import type { DecodeOptionsDocument } from '#shared/contract/http/decodes';
import type { JobProblem } from '#shared/contract/http/jobs';
import type { LinesView, PreviewView } from '#shared/contract/http/mapping';
import type { LineMapDocument } from '#shared/contract/line-map-document';
import type { Account } from '../entities/account';
import type { SourceFile } from '../jobs/worker-task';
import type { WorkerPool } from '../jobs/worker-pool';
import type { BlobStore } from '../storage/blob-store';
import type { CaptureService } from './capture-service';
import type { PresetService } from './preset-service';
import { ServiceError } from './service-error';

/** What stands between a file and its decode: which channel is which line. Works in threads of its own, beside the queue. */
export class MappingService {
  constructor(
    private readonly captures: CaptureService,
    private readonly presets: PresetService,
    private readonly blobs: BlobStore,
    private readonly pool: WorkerPool,
  ) {}

  /** @throws ServiceError 422 with the place in the file where it cannot be read */
  async lines(viewer: Account, number: string, sampleRateHz: number | undefined): Promise<LinesView> {
    const answer = await this.pool.run({ kind: 'lines', file: await this.fileOf(number), sampleRateHz });
    if (answer.kind === 'problem') throw toServiceError(answer.problem);
    if (answer.kind !== 'lines') throw new Error(`expected lines, not ${answer.kind}`);
    return { ...answer.lines, presets: await this.presets.matching(viewer, answer.names) };
  }

  /** @throws ServiceError 422 where the file cannot be read, or the map names a channel that is not there */
  async preview(number: string, map: LineMapDocument, options: DecodeOptionsDocument): Promise<PreviewView> {
    const file = await this.fileOf(number);
    const answer = await this.pool.run({ kind: 'preview', file, map, options });
    if (answer.kind === 'problem') throw toServiceError(answer.problem);
    if (answer.kind !== 'preview') throw new Error(`expected a preview, not ${answer.kind}`);
    return answer.preview;
  }

  private async fileOf(number: string): Promise<SourceFile> {
    const { sha256, fileName, blob } = await this.captures.find(number);
    return { path: this.blobs.pathOf(sha256), name: fileName, sha256, size: blob.size };
  }
}

function toServiceError({ code, detail, place, excerpt }: JobProblem): ServiceError {
  return new ServiceError(422, code, detail, {
    place: place ?? undefined,
    excerpt: excerpt ?? undefined,
  });
}
