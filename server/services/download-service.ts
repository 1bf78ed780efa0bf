import type { Store } from '../data-source';
import { Capture } from '../entities/capture';
import type { BlobStore } from '../storage/blob-store';
import type { ProductName, ProductStore } from '../storage/product-store';
import { numberOf } from './capture-number';
import type { CaptureService } from './capture-service';
import type { DecodeService } from './decode-service';

/** A stored file as it goes out. */
export interface Download {
  readonly path: string;
  /** Name it is saved under. */
  readonly name: string;
  readonly type: string;
  /** It never changes. */
  readonly isImmutable: boolean;
}

const PRODUCTS = {
  result: { product: 'result.json', ending: 'json', type: 'application/json', isOfCheck: true },
  log: { product: 'log.txt', ending: 'log.txt', type: 'text/plain; charset=utf-8', isOfCheck: true },
  tape: { product: 'tape.bin', ending: 'tape', type: 'application/octet-stream', isOfCheck: false },
  'packets.csv': {
    product: 'packets.csv',
    ending: 'packets.csv',
    type: 'text/csv; charset=utf-8; header=present',
    isOfCheck: false,
  },
} as const satisfies Record<string, { product: ProductName } & Record<string, unknown>>;

export type DownloadKind = keyof typeof PRODUCTS;

/** Files people may have: captures and what was made of them. */
export class DownloadService {
  constructor(
    private readonly store: Store,
    private readonly captures: CaptureService,
    private readonly decodes: DecodeService,
    private readonly blobs: BlobStore,
    private readonly products: ProductStore,
  ) {}

  async capture(number: string): Promise<Download> {
    const { sha256, fileName } = await this.captures.find(number);
    return {
      path: this.blobs.pathOf(sha256),
      name: fileName,
      type: 'application/octet-stream',
      isImmutable: true,
    };
  }

  /** @param checkId of which check result and log are wanted; the latest if left out */
  async product(kind: DownloadKind, decodeId: number, checkId?: number): Promise<Download> {
    const { product, ending, type, isOfCheck } = PRODUCTS[kind];
    const decode = await this.decodes.find(decodeId);
    const { folder } = isOfCheck ? await this.decodes.findCheck(decodeId, checkId) : decode;
    const { id } = await this.store.reader.findOneByOrFail(Capture, { id: decode.captureId });
    return {
      path: this.products.pathOf(folder, product),
      name: `${numberOf(id)}-decode-${decode.ordinal}.${ending}`,
      type,
      isImmutable: !isOfCheck || checkId !== undefined,
    };
  }
}
