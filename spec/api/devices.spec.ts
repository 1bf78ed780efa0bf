import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CaptureView } from '#shared/contract/http/captures';
import type { BuildDetail, BuildView, DeviceView } from '#shared/contract/http/devices';
import type { LinesView, PresetView } from '#shared/contract/http/mapping';
import type { Person } from './workspace';
import { expectProblem, Workspace } from './workspace';

let workspace: Workspace;
let person: Person;

beforeAll(async () => {
  workspace = await Workspace.open();
  person = await workspace.person('qa');
});
afterAll(() => workspace.close());

async function made<T>(path: string, body: object, by = person): Promise<T> {
  const answer = await workspace.ask(by, 'post', path).send(body);
  expect(answer.status, answer.text).toBe(201);
  return answer.body as T;
}

async function get<T>(path: string, by = person): Promise<T> {
  const answer = await workspace.ask(by, 'get', path);
  expect(answer.status, answer.text).toBe(200);
  return answer.body as T;
}

describe('devices and builds', () => {
  it('keep what was said of them, the newest build first', async () => {
    const input = { name: ' Trackball C ', kind: 'trackball', countsPerInch: 400, protocol: 'M3' };
    const device = await made<DeviceView>('/devices', input);
    expect(device).toMatchObject({ ...input, name: 'Trackball C', maker: '', notes: '', builds: [] });
    const first = await made<BuildView>(`/devices/${device.id}/builds`, { name: '1.0', board: 'C1' });
    const second = await made<BuildView>(`/devices/${device.id}/builds`, { name: '1.1' });
    expect(first).toMatchObject({ board: 'C1', notes: '', createdBy: { id: person.account.id } });
    const { builds } = await get<DeviceView>(`/devices/${device.id}`);
    expect(builds.map(({ id }) => id)).toEqual([second.id, first.id]);
  });

  it('change only in what is named', async () => {
    const input = { name: 'Panel mouse', kind: 'mouse', maker: 'Norrhavn', countsPerInch: 200 };
    const device = await made<DeviceView>('/devices', input);
    const changed = await workspace
      .ask(person, 'patch', `/devices/${device.id}`)
      .send({ countsPerInch: null, notes: 'Sealed.' });
    expect(changed.body).toEqual({ ...device, countsPerInch: null, notes: 'Sealed.' });
    const build = await made<BuildView>(`/devices/${device.id}/builds`, { name: '1.0', board: 'A' });
    const renamed = await workspace.ask(person, 'patch', `/builds/${build.id}`).send({ name: '1.0.1' });
    expect(renamed.body).toEqual({ ...build, name: '1.0.1' });
  });

  it('have names of their own, also after a change', async () => {
    const device = await made<DeviceView>('/devices', { name: 'Adapter', kind: 'adapter' });
    const other = await made<DeviceView>('/devices', { name: 'Adapter 2', kind: 'adapter' });
    const build = await made<BuildView>(`/devices/${device.id}/builds`, { name: '1' });
    await made(`/devices/${device.id}/builds`, { name: '2' });
    await made(`/devices/${other.id}/builds`, { name: '1' });
    const taken = await Promise.all([
      workspace.ask(person, 'post', '/devices').send({ name: 'Adapter', kind: 'mouse' }),
      workspace.ask(person, 'patch', `/devices/${other.id}`).send({ name: 'Adapter' }),
      workspace.ask(person, 'post', `/devices/${device.id}/builds`).send({ name: '1' }),
      workspace.ask(person, 'patch', `/builds/${build.id}`).send({ name: '2' }),
    ]);
    for (const answer of taken) {
      expect(expectProblem(answer, 409, 'name-taken').fields).toMatchObject([{ path: 'name' }]);
    }
    const same = workspace.ask(person, 'patch', `/devices/${device.id}`).send({ name: 'Adapter' });
    expect((await same).status).toBe(200);
  });

  it('of one name are made once, however many ask at the same time', async () => {
    const answers = await Promise.all(
      [1, 2, 3].map(() => workspace.ask(person, 'post', '/devices').send({ name: 'Once', kind: 'mouse' })),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409]);
  });

  it('count their captures by verdict, and take a capture that is given to them later', async () => {
    const device = await made<DeviceView>('/devices', { name: 'Desk mouse', kind: 'mouse' });
    const build = await made<BuildView>(`/devices/${device.id}/builds`, { name: '1.0' });
    const late = await workspace.upload(person, 'late-warm-reset.vcd', { buildId: build.id });
    await workspace.decode(person, late);
    const open = await workspace.upload(person, 'silent.vcd');
    const moved = await workspace.ask(person, 'patch', `/captures/${open}`).send({ buildId: build.id });
    expect(moved.body).toMatchObject({ device: { id: device.id }, build: { id: build.id, name: '1.0' } });
    const counts = { total: 2, pass: 0, fail: 1, inconclusive: 0, open: 1 };
    expect((await get<DeviceView>(`/devices/${device.id}`)).captures).toEqual(counts);
    const detail = await get<BuildDetail>(`/builds/${build.id}`);
    expect(detail.captures).toEqual(counts);
    expect(detail.captureList.map(({ number }) => number)).toEqual([open, late]);
    const taken = await workspace.ask(person, 'patch', `/captures/${open}`).send({ buildId: null });
    expect(taken.body).toMatchObject({ device: null, build: null });
    const unknown = await workspace.ask(person, 'patch', `/captures/${open}`).send({ buildId: 987_654 });
    expectProblem(unknown, 400, 'unknown-build');
  });
});

describe('what is known about a capture', () => {
  it('is replaced as a whole, and stays where only its build changes', async () => {
    const number = await workspace.upload(person, 'silent.vcd', {
      about: { subject: 'First', cable: '2 m' },
    });
    const path = `/captures/${number}`;
    const about = { subject: 'Second', temperatureC: 21.5, probedEnd: 'receiver', calibrationDue: null };
    expect((await workspace.ask(person, 'patch', path).send({ about })).body).toMatchObject({ about });
    expect((await get<CaptureView>(path)).about).toEqual(about);
    await workspace.ask(person, 'patch', path).send({ buildId: null });
    expect((await get<CaptureView>(path)).about).toEqual(about);
  });
});

describe('presets', () => {
  const channels = ['bench.port.rxd', 'bench.port.rts'];
  const map = { lines: { data: { channel: 'bench.port.rxd', polarity: 'line' as const } } };

  it('recognise a bench by its channel names, the most telling first', async () => {
    const number = await workspace.upload(person, 'late-warm-reset.vcd');
    const few = await made<PresetView>('/presets', { name: 'Few', channels, map });
    const more = { name: 'More', channels: [...channels, 'bench.port.dtr'], map };
    const most = await made<PresetView>('/presets', { ...more, options: { bitRate: 1200 } });
    await made('/presets', { name: 'Elsewhere', channels: [...channels, 'bench.port.cts'], map });
    const { presets } = await get<LinesView>(`/captures/${number}/lines`);
    expect(presets).toEqual([most, few]);
    const other = await workspace.upload(person, 'five-byte.csv');
    expect((await get<LinesView>(`/captures/${other}/lines`)).presets).toEqual([]);
  });

  it('are everybody’s to use and their owner’s to delete', async () => {
    const support = await workspace.person('support');
    const admin = await workspace.person('admin');
    const preset = await made<PresetView>('/presets', { name: 'Of support', channels, map }, support);
    const mayDelete = async (by: Person) =>
      (await get<PresetView[]>('/presets', by)).find(({ id }) => id === preset.id)?.mayDelete;
    expect([await mayDelete(support), await mayDelete(person), await mayDelete(admin)]).toEqual([
      true,
      false,
      true,
    ]);
    expect((await workspace.ask(support, 'delete', `/presets/${preset.id}`)).status).toBe(204);
    expect(await mayDelete(admin)).toBeUndefined();
  });

  it('have names of their own', async () => {
    await made('/presets', { name: 'Rig', channels, map });
    const again = await workspace.ask(person, 'post', '/presets').send({ name: 'Rig', channels, map });
    expectProblem(again, 409, 'name-taken');
  });
});
