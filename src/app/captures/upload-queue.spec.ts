import { HttpEventType, provideHttpClient } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { UploadQueue } from './upload-queue';

const file = (name: string, size = 1000) => new File([new Uint8Array(size)], name);

describe('UploadQueue', () => {
  let queue: UploadQueue;
  let server: HttpTestingController;
  const kinds = () => queue.list().map(({ state }) => state.kind);
  const passChecks = () =>
    server
      .match('/api/uploads/check')
      .forEach((check) => check.flush(null, { status: 204, statusText: 'No Content' }));

  beforeEach(() => {
    TestBed.configureTestingModule({ providers: [provideHttpClient(), provideHttpClientTesting()] });
    queue = TestBed.inject(UploadQueue);
    server = TestBed.inject(HttpTestingController);
  });
  afterEach(() => server.verify());

  it('sends two at a time and goes on with the third', () => {
    queue.add([file('a'), file('b'), file('c')]);
    expect(kinds()).toEqual(['sending', 'sending', 'waiting']);
    passChecks();
    const [first, second] = server.match('/api/captures');
    first.flush({ number: 'LW-0001' });
    expect(kinds()).toEqual(['received', 'sending', 'sending']);
    expect(queue.received().map(({ number }) => number)).toEqual(['LW-0001']);
    second.flush({ number: 'LW-0002' });
    passChecks();
    server.expectOne('/api/captures').flush({ number: 'LW-0003' });
    expect(queue.isBusy()).toBe(false);
  });

  it('does not send the body of what would be refused', () => {
    queue.add([file('big')]);
    const problem = { type: '', title: '', status: 413, detail: 'The file is too large.', code: 'too-large' };
    server.expectOne('/api/uploads/check').flush(problem, { status: 413, statusText: 'Too large' });
    expect(queue.list()[0].state).toMatchObject({ kind: 'refused', problem });
  });

  it('tells how far it is, and can be sent again after the connection was lost', () => {
    queue.add([file('a', 2000)]);
    passChecks();
    const upload = server.expectOne('/api/captures');
    upload.event({ type: HttpEventType.UploadProgress, loaded: 500, total: 2200 });
    expect(queue.list()[0].state).toMatchObject({ kind: 'sending', sentBytes: 500 });
    upload.error(new ProgressEvent('error'));
    expect(kinds()).toEqual(['lost']);
    queue.sendAgain(queue.list()[0].id);
    passChecks();
    server.expectOne('/api/captures').flush({ number: 'LW-0001' });
    expect(kinds()).toEqual(['received']);
  });

  it('breaks off an upload that is taken off the list', () => {
    queue.add([file('a')]);
    passChecks();
    const upload = server.expectOne('/api/captures');
    queue.remove(queue.list()[0].id);
    expect(upload.cancelled).toBe(true);
    expect(queue.list()).toEqual([]);
  });
});
