import type { EntityManager } from 'typeorm';
import type * as z from 'zod';
import type {
  BuildChange,
  BuildView,
  DeviceChange,
  DeviceView,
  newBuildSchema,
  newDeviceSchema,
} from '#shared/contract/http/devices';
import type { Store } from '../data-source';
import type { Account } from '../entities/account';
import { Build } from '../entities/build';
import { Device } from '../entities/device';
import { audit } from './audit';
import { countCaptures, toBuildView, toDeviceView } from './device-view';
import type { EventHub } from './event-hub';
import { Conflict, NotFound } from './service-error';

/** Products under test and their builds. */
export class DeviceService {
  constructor(
    private readonly store: Store,
    private readonly events: EventHub,
  ) {}

  async list(): Promise<DeviceView[]> {
    return this.load();
  }

  async find(id: number): Promise<DeviceView> {
    const [device] = await this.load(id);
    if (device === undefined) throw new NotFound('This device');
    return device;
  }

  async create(by: Account, input: z.output<typeof newDeviceSchema>): Promise<DeviceView> {
    const id = await this.store.write(async (manager) => {
      await refuseSameName(manager, input.name);
      const device = await manager.save(Device, { ...input, createdAt: Date.now() });
      await audit(manager, by, 'device.created', device.name);
      return device.id;
    });
    return this.tell(id);
  }

  async change(by: Account, id: number, input: DeviceChange): Promise<DeviceView> {
    await this.store.write(async (manager) => {
      const device = await manager.findOneBy(Device, { id });
      if (device === null) throw new NotFound('This device');
      if (input.name !== undefined && input.name !== device.name) await refuseSameName(manager, input.name);
      await manager.update(Device, id, { ...input, id });
      await audit(manager, by, 'device.changed', device.name, { ...input });
    });
    return this.tell(id);
  }

  async createBuild(
    by: Account,
    deviceId: number,
    input: z.output<typeof newBuildSchema>,
  ): Promise<BuildView> {
    const id = await this.store.write(async (manager) => {
      const device = await manager.findOneBy(Device, { id: deviceId });
      if (device === null) throw new NotFound('This device');
      await refuseSameBuild(manager, deviceId, input.name);
      const build = await manager.save(Build, {
        ...input,
        deviceId,
        createdById: by.id,
        createdAt: Date.now(),
      });
      await audit(manager, by, 'build.created', `${device.name} ${build.name}`);
      return build.id;
    });
    this.events.publish({ kind: 'device', id: deviceId });
    return this.findBuild(id);
  }

  async findBuild(id: number): Promise<BuildView> {
    const build = await this.store.reader.findOne(Build, {
      where: { id },
      relations: { device: true, createdBy: true },
    });
    if (build === null) throw new NotFound('This build');
    return toBuildView(build, build.device, await countCaptures(this.store.reader, [id]));
  }

  async changeBuild(by: Account, id: number, input: BuildChange): Promise<BuildView> {
    const deviceId = await this.store.write(async (manager) => {
      const build = await manager.findOneBy(Build, { id });
      if (build === null) throw new NotFound('This build');
      if (input.name !== undefined && input.name !== build.name) {
        await refuseSameBuild(manager, build.deviceId, input.name);
      }
      await manager.update(Build, id, { ...input, id });
      await audit(manager, by, 'build.changed', build.name, { ...input });
      return build.deviceId;
    });
    this.events.publish({ kind: 'device', id: deviceId });
    return this.findBuild(id);
  }

  private async load(id?: number): Promise<DeviceView[]> {
    const devices = await this.store.reader.find(Device, {
      ...(id === undefined ? {} : { where: { id } }),
      relations: { builds: { createdBy: true } },
      order: { name: 'ASC', builds: { createdAt: 'DESC', id: 'DESC' } },
    });
    const builds = devices.flatMap((device) => device.builds.map((build) => build.id));
    const counts = await countCaptures(this.store.reader, builds);
    return devices.map((device) => toDeviceView(device, counts));
  }

  private async tell(id: number): Promise<DeviceView> {
    this.events.publish({ kind: 'device', id });
    return this.find(id);
  }
}

async function refuseSameName(manager: EntityManager, name: string): Promise<void> {
  if (!(await manager.existsBy(Device, { name }))) return;
  throw new Conflict('name-taken', 'A device of this name exists.', [
    { path: 'name', message: 'already in use' },
  ]);
}

async function refuseSameBuild(manager: EntityManager, deviceId: number, name: string): Promise<void> {
  if (!(await manager.existsBy(Build, { deviceId, name }))) return;
  throw new Conflict('name-taken', 'The device has a build of this name.', [
    { path: 'name', message: 'already in use' },
  ]);
}
