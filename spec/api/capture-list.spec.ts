import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CapturePage } from '#shared/contract/http/captures';
import { PAGE_SIZE } from '#shared/contract/http/captures';
import type { Person } from './workspace';
import { Workspace } from './workspace';

let workspace: Workspace;
let ines: Person;
let mira: Person;
let late: string;
let quiet: string;
let bare: string;
let buildId: number;

beforeAll(async () => {
  workspace = await Workspace.open();
  ines = await workspace.person('firmware');
  mira = await workspace.person('support');
  const device = await workspace
    .ask(ines, 'post', '/devices')
    .send({ name: 'Trackball C', kind: 'trackball' });
  const { id } = device.body as { id: number };
  const build = await workspace.ask(ines, 'post', `/devices/${id}/builds`).send({ name: '2.3.0-rc4' });
  buildId = (build.body as { id: number }).id;
  late = await workspace.upload(ines, 'late-warm-reset.vcd', { buildId, about: { subject: 'Late reply' } });
  quiet = await workspace.upload(mira, 'silent.vcd', { about: { subject: '100 % silent' } });
  bare = await workspace.upload(mira, 'lost-character.vcd');
  await workspace.decode(ines, late);
  await workspace.decode(mira, quiet);
});
afterAll(() => workspace.close());

async function list(query: Record<string, string | number> = {}): Promise<CapturePage> {
  const answer = await workspace.ask(ines, 'get', '/captures').query(query);
  expect(answer.status, answer.text).toBe(200);
  return answer.body as CapturePage;
}

const numbers = async (query: Record<string, string | number>): Promise<string[]> =>
  (await list(query)).captures.map(({ number }) => number);

describe('the list of captures', () => {
  it('holds what is open, who has captures, and figures of the whole workspace', async () => {
    const page = await list();
    expect(page).toMatchObject({ total: 3, page: 1, pageSize: PAGE_SIZE });
    expect(page.captures.map(({ number }) => number)).toEqual([bare, quiet, late]);
    expect(page.captures.map(({ mayDelete }) => mayDelete)).toEqual([false, false, true]);
    expect(page.owners.map(({ id }) => id)).toEqual([ines.account.id, mira.account.id]);
    expect(page.counts).toMatchObject({ registered: 3, thisWeek: 3, unmapped: 1 });
    expect(page.counts.violations).toBeGreaterThanOrEqual(1);
    const violating = page.captures.filter(({ decode }) => (decode?.check?.counts.violation ?? 0) > 0);
    expect(page.counts.capturesWithViolations).toBe(violating.length);
  });

  it('is sorted as asked', async () => {
    expect(await numbers({ sort: 'oldest' })).toEqual([late, quiet, bare]);
    expect((await numbers({ sort: 'worst' }))[0]).toBe(late);
    expect(await numbers({ sort: 'longest' })).toEqual([late, quiet, bare]);
  });

  it('is filtered by state, verdict, owner, build and device', async () => {
    expect(await numbers({ state: 'received' })).toEqual([bare]);
    expect(await numbers({ state: 'decoded', owner: mira.account.id })).toEqual([quiet]);
    expect(await numbers({ verdict: 'fail' })).toContain(late);
    expect(await numbers({ verdict: 'pass', owner: ines.account.id })).toEqual([]);
    expect(await numbers({ build: buildId })).toEqual([late]);
    expect(await numbers({ device: 1 })).toEqual([late]);
    expect((await list({ state: 'failed' })).counts.registered).toBe(3);
  });

  it('is searched by number, subject, file, device, build and seal', async () => {
    const seal = (await list()).captures.find(({ number }) => number === quiet)!.sha256.slice(0, 8);
    for (const search of [late, late.toLowerCase(), 'LATE rep', 'warm-reset', 'trackball', 'rc4']) {
      expect(await numbers({ search }), search).toEqual([late]);
    }
    // A bare number may also be the begin of a seal.
    expect(await numbers({ search: String(Number(late.slice(3))) })).toContain(late);
    expect(await numbers({ search: seal.toUpperCase() })).toEqual([quiet]);
    expect(await numbers({ search: 'nothing of the kind' })).toEqual([]);
  });

  it('takes signs of the database’s own language as they are', async () => {
    expect(await numbers({ search: '100 %' })).toEqual([quiet]);
    expect(await numbers({ search: '%' })).toEqual([quiet]);
    expect(await numbers({ search: '_' })).toEqual([]);
    expect(await numbers({ search: "' OR 1=1 --" })).toEqual([]);
  });

  it('comes in pages that together hold each capture once', async () => {
    for (let i = 0; i < PAGE_SIZE; i++) await workspace.upload(mira, 'silent.vcd');
    const pages = [await numbers({ page: 1 }), await numbers({ page: 2 }), await numbers({ page: 3 })];
    expect(pages.map(({ length }) => length)).toEqual([PAGE_SIZE, 3, 0]);
    expect(new Set(pages.flat()).size).toBe(PAGE_SIZE + 3);
    expect((await list({ page: 2 })).total).toBe(PAGE_SIZE + 3);
  });
});
