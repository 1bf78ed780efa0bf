import type { Request, Response } from 'express';
import multer from 'multer';
import { checkHead } from '../storage/check-head';
import type { BlobStore, ReceivedFile } from '../storage/blob-store';
import { Invalid, ServiceError } from '../services/service-error';

/** Room for the other parts of a multipart body, bytes. */
const OVERHEAD = 128 * 1024;
const LONGEST_ABOUT = 64 * 1024;
/** An upload that brings less than this in this time is given up. */
const WATCH_MS = 30_000;
const LEAST_BYTES = 16 * 1024;

export interface ReceivedUpload {
  readonly file: ReceivedFile;
  readonly fileName: string;
  /** Parsed JSON of the field `about`; an empty object without it. */
  readonly about: unknown;
}

/** @throws ServiceError 413 or 507 where a file of this size would not be taken */
export async function refuseSize(size: number, blobs: BlobStore, limit: number): Promise<void> {
  if (size === 0) throw new ServiceError(415, 'empty-file', 'The file is empty.');
  if (size > limit) {
    const detail = `The file has ${megabytes(size)} MB; the limit is ${megabytes(limit)} MB.`;
    throw new ServiceError(413, 'too-large', detail);
  }
  if (size > (await blobs.room())) {
    throw new ServiceError(507, 'disk-full', 'The disk of the server is nearly full. Tell an admin.');
  }
}

function megabytes(bytes: number): string {
  return (bytes / 1e6).toFixed(1);
}

/** Takes a multipart body: the file goes to the store while it comes in. The caller keeps or discards it. */
export async function receiveUpload(
  req: Request,
  res: Response,
  blobs: BlobStore,
  limit: number,
): Promise<ReceivedUpload> {
  const length = Number(req.get('content-length') ?? 0);
  // Before a byte is read: over its own limit multer reads on to the end.
  if (length > OVERHEAD) await refuseSize(length - OVERHEAD, blobs, limit);
  let received: ReceivedFile | undefined;
  const storage: multer.StorageEngine = {
    _handleFile: (_req, file, done) => {
      blobs.receive(file.stream, checkHead()).then(
        (whole) => {
          received = whole;
          done(null, { size: whole.size });
        },
        (error: unknown) => done(error),
      );
    },
    _removeFile: (_req, _file, done) => {
      discard(blobs, received).then(() => done(null), done);
    },
  };
  const limits = { fileSize: limit, files: 1, fields: 2, parts: 4, fieldSize: LONGEST_ABOUT };
  const parse = multer({ storage, limits, defParamCharset: 'utf8' }).single('file');
  const stopWatching = watchPace(req);
  try {
    await new Promise<void>((resolve, reject) => {
      parse(req, res, (error: unknown) => (error === undefined ? resolve() : reject(error as Error)));
    });
    if (received === undefined || req.file === undefined) {
      throw new Invalid('no-file', 'The body has no file.', {
        fields: [{ path: 'file', message: 'missing' }],
      });
    }
    return { file: received, fileName: plainName(req.file.originalname), about: aboutOf(req.body) };
  } catch (error) {
    await discard(blobs, received);
    throw error;
  } finally {
    stopWatching();
  }
}

async function discard(blobs: BlobStore, file: ReceivedFile | undefined): Promise<void> {
  if (file !== undefined) await blobs.discard(file);
}

/** Large uploads may take long, but not for ever. */
function watchPace(req: Request): () => void {
  let before = req.socket.bytesRead;
  const timer = setInterval(() => {
    const now = req.socket.bytesRead;
    if (!req.complete && now - before < LEAST_BYTES) req.destroy(new Error('Request aborted'));
    before = now;
  }, WATCH_MS);
  timer.unref();
  return () => clearInterval(timer);
}

function plainName(name: string): string {
  // Control characters and paths have no place in a name people read.
  const plain = name
    .replace(/^.*[\\/]/, '')
    .replace(/[\u0000-\u001f\u007f]/g, '')
    .trim();
  return plain === '' ? 'capture' : plain.slice(-200);
}

function aboutOf(body: unknown): unknown {
  const { about } = (body ?? {}) as { about?: unknown };
  if (about === undefined) return {};
  try {
    return JSON.parse(String(about)) as unknown;
  } catch {
    // What a client sends may be anything.
    throw new Invalid('bad-json', 'The field about is no JSON.', {
      fields: [{ path: 'about', message: 'no JSON' }],
    });
  }
}
