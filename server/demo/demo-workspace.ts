import { createReadStream } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { newCaptureSchema } from '#shared/contract/http/captures';
import { newDecodeSchema } from '#shared/contract/http/decodes';
import { newBuildSchema, newDeviceSchema } from '#shared/contract/http/devices';
import type { LinesView } from '#shared/contract/http/mapping';
import { newPresetSchema } from '#shared/contract/http/mapping';
import type { LineMapDocument } from '#shared/contract/line-map-document';
import type { Account } from '../entities/account';
import type { Services } from '../services/services';
import type { DemoCapture } from './demo-script';
import { DEMO_CAPTURES, DEMO_DEVICES } from './demo-script';

/** Stands two folders below the root both as source and in the bundle. */
const SAMPLES = fileURLToPath(new URL('../../samples/', import.meta.url));

type People = ReadonlyMap<string, Account>;

interface Registered {
  readonly number: string;
  readonly owner: Account;
  readonly capture: DemoCapture;
}

/** Devices, builds and captures, through the services everybody uses. */
export async function registerDemo(services: Services, people: People): Promise<Registered[]> {
  const builds = await makeDevices(services, people.get('ines')!);
  const registered: Registered[] = [];
  for (const capture of DEMO_CAPTURES) {
    const owner = people.get(capture.owner)!;
    const buildId = capture.build === undefined ? null : builds.get(capture.build)!;
    const file = await services.blobs.receive(createReadStream(SAMPLES + capture.file));
    const input = newCaptureSchema.parse({ about: capture.about, buildId });
    const { number } = await services.captures.register(owner, file, capture.file, input);
    registered.push({ number, owner, capture });
  }
  return registered;
}

/** Maps and decodes what was registered, as a person would: takes the suggestions, asks for a decode, keeps two benches as presets. */
export async function decodeDemo(services: Services, registered: readonly Registered[]): Promise<void> {
  for (const { number, owner, capture } of registered) {
    if (capture.isUnmapped === true) continue;
    const lines = await services.mappings.lines(owner, number, undefined);
    const map = { ...acceptSuggestions(lines), probedEnd: capture.about.probedEnd ?? undefined };
    if (capture.file === 'healthy-m.vcd') await keepPreset(services, owner, 'Rig 2, line side', lines, map);
    if (capture.file === 'five-byte.csv') await keepPreset(services, owner, 'Rig 3, logic side', lines, map);
    await services.decodes.ask(owner, number, newDecodeSchema.parse({ map }));
  }
}

async function makeDevices({ devices }: Services, by: Account): Promise<ReadonlyMap<string, number>> {
  const ids = new Map<string, number>();
  for (const { builds, ...device } of DEMO_DEVICES) {
    const { id, name } = await devices.create(by, newDeviceSchema.parse(device));
    for (const build of builds) {
      const made = await devices.createBuild(by, id, newBuildSchema.parse(build));
      ids.set(`${name} ${made.name}`, made.id);
    }
  }
  return ids;
}

function acceptSuggestions({ suggestions }: LinesView): LineMapDocument {
  const found = suggestions.flatMap(({ role, channel, polarity }) =>
    channel === null || polarity === null ? [] : [[role, { channel, polarity }] as const],
  );
  return { lines: Object.fromEntries(found) };
}

async function keepPreset(
  { presets }: Services,
  by: Account,
  name: string,
  { channels }: LinesView,
  map: LineMapDocument,
): Promise<void> {
  const preset = { name, channels: channels.map((channel) => channel.name), map };
  await presets.create(by, newPresetSchema.parse(preset));
}
