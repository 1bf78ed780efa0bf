import type { CaptureView } from '#shared/contract/http/captures';
import type { JobView } from '#shared/contract/http/jobs';
import { rowState } from './capture-row-state';

const job = (id: number, state: JobView['state']): JobView => ({
  id,
  capture: 'LW-0001',
  kind: 'decode',
  state,
  percent: 0,
  decodeId: null,
  checkId: null,
  problem: null,
  createdAt: '',
});
const capture = (part: Partial<CaptureView>) => ({ job: null, decode: null, ...part }) as CaptureView;

describe('rowState', () => {
  it('asks for a map where nothing was done', () =>
    expect(rowState(capture({}), null)).toEqual({ kind: 'received' }));
  it('follows what was heard after the list was asked for', () =>
    expect(rowState(capture({ job: job(3, 'failed') }), job(4, 'running'))).toEqual({
      kind: 'busy',
      job: job(4, 'running'),
    }));
  it('does not fall back to an older job', () =>
    expect(rowState(capture({ job: job(4, 'failed') }), job(3, 'running'))).toEqual({
      kind: 'failed',
      job: job(4, 'failed'),
    }));
  it('keeps showing the decode when a later one failed', () =>
    expect(rowState(capture({ decode: {} as never, job: job(5, 'failed') }), null)).toEqual({
      kind: 'decoded',
    }));
});
