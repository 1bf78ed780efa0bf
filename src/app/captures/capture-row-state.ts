import type { CaptureView } from '#shared/contract/http/captures';
import type { JobView } from '#shared/contract/http/jobs';

export type RowState =
  | { readonly kind: 'received' }
  | { readonly kind: 'busy'; readonly job: JobView }
  | { readonly kind: 'failed'; readonly job: JobView }
  | { readonly kind: 'decoded' };

/** What a row shows: the newest of what the list said and what was heard since. */
export function rowState(capture: CaptureView, heard: JobView | null): RowState {
  const listed = capture.job;
  const job = heard !== null && (listed === null || heard.id >= listed.id) ? heard : listed;
  if (job !== null && (job.state === 'queued' || job.state === 'running')) return { kind: 'busy', job };
  if (capture.decode !== null) return { kind: 'decoded' };
  if (job?.state === 'failed') return { kind: 'failed', job };
  return { kind: 'received' };
}
