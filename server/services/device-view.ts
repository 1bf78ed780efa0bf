import type { EntityManager } from 'typeorm';
import { In } from 'typeorm';
import type { BuildView, CaptureCounts, DeviceView } from '#shared/contract/http/devices';
import type { Build } from '../entities/build';
import { Capture } from '../entities/capture';
import type { Device } from '../entities/device';
import { toPersonRef } from './account-view';

type Counts = ReadonlyMap<number, CaptureCounts>;

const NONE: CaptureCounts = { total: 0, pass: 0, fail: 0, inconclusive: 0, open: 0 };

/** Captures of builds by verdict. */
export async function countCaptures(reader: EntityManager, builds: readonly number[]): Promise<Counts> {
  const rows = await reader
    .createQueryBuilder(Capture, 'capture')
    .select('capture.buildId', 'buildId')
    .addSelect('capture.verdict', 'verdict')
    .addSelect('COUNT(*)', 'count')
    .where({ buildId: In([...builds]) })
    .groupBy('capture.buildId')
    .addGroupBy('capture.verdict')
    .getRawMany<{ buildId: number; verdict: Capture['verdict']; count: number }>();
  const counts = new Map<number, CaptureCounts>();
  for (const { buildId, verdict, count } of rows) {
    const before = counts.get(buildId) ?? NONE;
    const key = verdict ?? 'open';
    counts.set(buildId, { ...before, total: before.total + count, [key]: before[key] + count });
  }
  return counts;
}

export function toDeviceView(device: Device, counts: Counts): DeviceView {
  const builds = device.builds.map((build) => toBuildView(build, device, counts));
  return {
    id: device.id,
    name: device.name,
    kind: device.kind as DeviceView['kind'],
    maker: device.maker,
    countsPerInch: device.countsPerInch,
    protocol: device.protocol,
    notes: device.notes,
    captures: builds.reduce((sum, build) => add(sum, build.captures), NONE),
    builds,
    createdAt: new Date(device.createdAt).toISOString(),
  };
}

export function toBuildView(build: Build, device: Pick<Device, 'id' | 'name'>, counts: Counts): BuildView {
  return {
    id: build.id,
    device: { id: device.id, name: device.name },
    name: build.name,
    board: build.board,
    notes: build.notes,
    captures: counts.get(build.id) ?? NONE,
    createdBy: toPersonRef(build.createdBy),
    createdAt: new Date(build.createdAt).toISOString(),
  };
}

function add(a: CaptureCounts, b: CaptureCounts): CaptureCounts {
  return {
    total: a.total + b.total,
    pass: a.pass + b.pass,
    fail: a.fail + b.fail,
    inconclusive: a.inconclusive + b.inconclusive,
    open: a.open + b.open,
  };
}
