import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { decodeResultSchema } from '#shared/contract/decode-result';
import type { Ticket } from '#shared/contract/http/downloads';
import type { JobView } from '#shared/contract/http/jobs';
import { decodeTape } from '#shared/contract/tape-payload';
import type { Person } from './workspace';
import { expectProblem, sample, Workspace } from './workspace';

let workspace: Workspace;
let person: Person;
let number: string;
let baseline: JobView;
let hosts: JobView;

beforeAll(async () => {
  workspace = await Workspace.open();
  person = await workspace.person('support');
  number = await workspace.upload(person, 'late-warm-reset.vcd');
  baseline = await workspace.decode(person, number);
  const path = `/decodes/${baseline.decodeId}/checks`;
  const asked = await workspace.ask(person, 'post', path).send({ rulebook: 'host-limits' });
  hosts = await workspace.finished(person, (asked.body as JobView).id);
});
afterAll(() => workspace.close());
afterEach(() => vi.useRealTimers());

const product = (name: string) => `/decodes/${baseline.decodeId}/${name}`;
const get = (path: string) => workspace.ask(person, 'get', path);

async function ticketFor(path: string): Promise<Ticket> {
  const answer = await workspace.ask(person, 'post', '/download-tickets').send({ path });
  expect(answer.status, answer.text).toBe(201);
  return answer.body as Ticket;
}

const redeem = ({ url }: Ticket) => workspace.ask(undefined, 'get', url.replace(/^\/api/, ''));

describe('a download', () => {
  it('of a capture is the file byte by byte, never shown as a page of ours', async () => {
    const html = Buffer.from('$comment <script>alert(1)</script> $end\n$timescale 1 us $end\n');
    const page = Buffer.concat([html, await sample('silent.vcd')]);
    const made = await workspace.ask(person, 'post', '/captures').attach('file', page, 'Prüfstand "3".html');
    const answer = await get(`/captures/${(made.body as { number: string }).number}/file`);
    expect(answer.body).toEqual(page);
    expect(answer.headers).toMatchObject({
      'content-type': 'application/octet-stream',
      'x-content-type-options': 'nosniff',
      'cache-control': expect.stringContaining('immutable'),
      'content-disposition': expect.stringMatching(
        /^attachment; .*filename\*=UTF-8''Pr%C3%BCfstand%20%223%22\.html$/,
      ),
    });
  });

  it('of a result is what the contract says, of the latest check or of the one that is named', async () => {
    const latest = decodeResultSchema.parse((await get(product('result'))).body);
    expect(latest).toMatchObject({ protocol: 'M3', capture: { file: 'late-warm-reset.vcd' } });
    const named = await get(product(`result?check=${baseline.checkId}`));
    const limitOf = ({ rules }: typeof latest) => rules.find(({ id }) => id === 'HSK-1')?.verdict;
    expect([limitOf(latest), limitOf(decodeResultSchema.parse(named.body))]).toEqual(['pass', 'violation']);
    expect(named.headers['cache-control']).toContain('immutable');
    expect((await get(product('result'))).headers['cache-control']).toBe('no-store');
  });

  it('of a log is text under a telling name, of the check that is named', async () => {
    const answer = await get(product(`log?check=${hosts.checkId}`));
    expect(answer.headers).toMatchObject({
      'content-type': 'text/plain; charset=utf-8',
      'content-disposition': `attachment; filename=${number}-decode-1.log.txt`,
    });
    expect(answer.text).toContain('Host limits');
    expect((await get(product(`log?check=${baseline.checkId}`))).text).toContain('Baseline');
  });

  // Source: RFC 4180 with RFC 7111 for the type, from memory.
  it('of the packets is a table with a header and a row each', async () => {
    const answer = await get(product('packets.csv'));
    expect(answer.headers['content-type']).toMatch(/^text\/csv; charset=utf-8/);
    const [header, ...rows] = answer.text.trimEnd().split(/\r?\n/);
    expect(header).toContain(',');
    const { packets } = (await get(`/decodes/${baseline.decodeId}`)).body as { packets: number };
    expect(rows.filter((row) => !row.startsWith('#'))).toHaveLength(packets);
  });

  it('of the tape is what the browser unpacks', async () => {
    const answer = await get(product('tape'));
    const bytes = answer.body as Buffer;
    const tape = decodeTape(
      bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length) as ArrayBuffer,
    );
    expect(tape.resets).toHaveLength(3);
    expect(tape.protocol).toBe('M3');
  });

  it('of a check of another decode does not exist', async () => {
    const other = await workspace.decode(person, await workspace.upload(person, 'silent.vcd'));
    expectProblem(await get(product(`log?check=${other.checkId}`)), 404, 'not-found');
    expectProblem(await get(product('result?check=987654')), 404, 'not-found');
    expectProblem(await get(product('result?check=latest')), 400, 'invalid');
  });
});

describe('a ticket', () => {
  it('lets whoever has it download once', async () => {
    const ticket = await ticketFor(product(`log?check=${baseline.checkId}`));
    expect(ticket.url).toMatch(/^\/api\/downloads\/[\w-]{43}$/);
    const first = await redeem(ticket);
    expect(first.status).toBe(200);
    expect(first.text).toEqual((await get(product(`log?check=${baseline.checkId}`))).text);
    expect(first.headers).toMatchObject({
      'content-disposition': expect.stringMatching(/^attachment; filename=/),
      'cache-control': 'no-store',
    });
    expectProblem(await redeem(ticket), 404, 'not-found');
  });

  it('lets only one of two that come at once', async () => {
    const ticket = await ticketFor(`/captures/${number}/file`);
    const answers = await Promise.all([redeem(ticket), redeem(ticket)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 404]);
  });

  it('is good for a minute', async () => {
    const ticket = await ticketFor(product('tape'));
    vi.useFakeTimers({ toFake: ['Date'], now: Date.parse(ticket.expiresAt) + 1 });
    expectProblem(await redeem(ticket), 404, 'not-found');
    expect(Date.now() - Date.parse(ticket.expiresAt)).toBeLessThan(60_000);
  });

  it.each([
    '/people',
    '/captures/LW-0001',
    '/captures/LW-0001/file/more',
    '/captures/../people',
    '/decodes/1/secrets',
    'https://elsewhere.example/decodes/1/log',
    '//elsewhere.example/decodes/1/log',
    '//',
    'http://[',
    '?',
  ])('is given for no other path: %s', async (path) => {
    const answer = await workspace.ask(person, 'post', '/download-tickets').send({ path });
    expect(expectProblem(answer, 400, 'no-download').fields).toMatchObject([{ path: 'path' }]);
  });

  it('is not given for what does not exist', async () => {
    for (const path of ['/captures/LW-987654/file', '/decodes/987654/log', product('log?check=987654')]) {
      const answer = await workspace.ask(person, 'post', '/download-tickets').send({ path });
      expectProblem(answer, 404, 'not-found');
    }
  });
});
