import { newCaptureSchema } from '#shared/contract/http/captures';
import type { Config } from '../config';
import type { EndpointRouter } from '../middleware/endpoint-router';
import { ServiceError } from '../services/service-error';
import type { Services } from '../services/services';
import { idOf } from '../services/capture-number';
import { receiveUpload, refuseSize } from './upload';

/** Endings of files that are surely no text. The content decides in the end. */
const NO_CAPTURES =
  /\.(zip|gz|bz2|xz|zst|7z|rar|tar|png|jpe?g|gif|webp|bmp|tiff?|svg|pdf|docx?|xlsx?|pptx?|odt|ods|exe|dll|bin|mp[34]|wav|avi|mov)$/i;

export function captureRoutes(
  router: EndpointRouter,
  { captures, blobs, runner }: Services,
  { uploadLimitBytes }: Pick<Config, 'uploadLimitBytes'>,
): void {
  router
    .on('POST /uploads/check', async ({ body }) => {
      const ending = NO_CAPTURES.exec(body.name)?.[0];
      if (ending !== undefined) {
        const detail = `A capture is a text file (VCD or CSV), not ${ending}. Unpack or export it first.`;
        throw new ServiceError(415, 'not-a-capture', detail);
      }
      await refuseSize(body.size, blobs, uploadLimitBytes);
    })
    .on('POST /captures', async ({ account, req, res }) => {
      const { file, fileName, about } = await receiveUpload(req, res, blobs, uploadLimitBytes);
      try {
        return await captures.register(account, file, fileName, newCaptureSchema.parse(about));
      } finally {
        // Kept or refused: under its temporary name nobody wants it any more.
        await blobs.discard(file);
      }
    })
    .on('GET /captures', ({ account, query }) => captures.page(account, query))
    .on('GET /captures/:number', ({ account, params }) => captures.view(account, params.number))
    .on('PATCH /captures/:number', ({ account, params, body }) =>
      captures.change(account, params.number, body),
    )
    .onOwned(
      'DELETE /captures/:number',
      ({ number }) => captures.ownerOf(number),
      async ({ account, params }) => {
        await runner.cancelOf(idOf(params.number));
        await captures.remove(account, params.number);
      },
    );
}
