import { HttpClient, provideHttpClient, withInterceptors } from '@angular/common/http';
import { HttpTestingController, provideHttpClientTesting } from '@angular/common/http/testing';
import { TestBed } from '@angular/core/testing';
import { provideRouter, Router } from '@angular/router';
import type { Session as SessionView } from '#shared/contract/http/accounts';
import { Session } from '../account/session';
import { sessionInterceptor } from './session-interceptor';

const view = (accessToken: string): SessionView => ({
  accessToken,
  expiresAt: new Date(Date.now() + 600_000).toISOString(),
  account: {
    id: 1,
    name: 'Ines',
    initials: 'I',
    email: 'ines@norrhavn.example',
    role: 'firmware',
    preferences: {},
  },
});

describe('sessionInterceptor', () => {
  let http: HttpClient;
  let server: HttpTestingController;
  let session: Session;

  beforeEach(() => {
    TestBed.configureTestingModule({
      providers: [
        provideHttpClient(withInterceptors([sessionInterceptor])),
        provideHttpClientTesting(),
        provideRouter([]),
      ],
    });
    http = TestBed.inject(HttpClient);
    server = TestBed.inject(HttpTestingController);
    session = TestBed.inject(Session);
    session.take(view('old'));
  });
  afterEach(() => {
    server.verify();
    localStorage.clear();
  });

  it('sends the token with requests of ours, and with nothing else', () => {
    http.get('/api/devices').subscribe();
    expect(server.expectOne('/api/devices').request.headers.get('Authorization')).toBe('Bearer old');
    http.get('/assets/mark.svg').subscribe();
    expect(server.expectOne('/assets/mark.svg').request.headers.has('Authorization')).toBe(false);
    http.get('/api/workspace').subscribe();
    expect(server.expectOne('/api/workspace').request.headers.has('Authorization')).toBe(false);
  });

  it('refreshes once for many requests that are refused together, and sends each again once', () => {
    const answers: unknown[] = [];
    for (const path of ['a', 'b', 'c']) http.get(`/api/${path}`).subscribe((answer) => answers.push(answer));
    for (const path of ['a', 'b', 'c'])
      server.expectOne(`/api/${path}`).flush({}, { status: 401, statusText: 'Unauthorized' });
    server.expectOne('/api/session/refresh').flush(view('new'));
    for (const path of ['a', 'b', 'c']) {
      const again = server.expectOne(`/api/${path}`);
      expect(again.request.headers.get('Authorization')).toBe('Bearer new');
      again.flush(path);
    }
    expect(answers).toEqual(['a', 'b', 'c']);
  });

  it('uses a token another request got meanwhile instead of refreshing again', () => {
    http.get('/api/a').subscribe();
    const refused = server.expectOne('/api/a');
    session.take(view('new'));
    refused.flush({}, { status: 401, statusText: 'Unauthorized' });
    expect(server.expectOne('/api/a').request.headers.get('Authorization')).toBe('Bearer new');
  });

  it('ends the session where it cannot be refreshed, and leads back after the sign-in', () => {
    const navigate = vi.spyOn(TestBed.inject(Router), 'navigate').mockResolvedValue(true);
    let status = 0;
    http.get('/api/a').subscribe({ error: (error: { status: number }) => (status = error.status) });
    server.expectOne('/api/a').flush({}, { status: 401, statusText: 'Unauthorized' });
    server.expectOne('/api/session/refresh').flush({}, { status: 401, statusText: 'Unauthorized' });
    expect(status).toBe(401);
    expect(session.account()).toBeNull();
    expect(navigate).toHaveBeenCalledWith(
      ['/sign-in'],
      expect.objectContaining({ queryParams: { to: '/', ended: true } }),
    );
  });

  it('leaves other refusals to whoever asked', () => {
    let status = 0;
    http.get('/api/a').subscribe({ error: (error: { status: number }) => (status = error.status) });
    server.expectOne('/api/a').flush({}, { status: 403, statusText: 'Forbidden' });
    expect(status).toBe(403);
    expect(session.account()).not.toBeNull();
  });
});
