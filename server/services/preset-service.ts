import type { EntityManager } from 'typeorm';
import type * as z from 'zod';
import type { newPresetSchema, PresetView } from '#shared/contract/http/mapping';
import type { Store } from '../data-source';
import type { Account } from '../entities/account';
import { Preset } from '../entities/preset';
import { mayTouch } from '../permissions';
import { toPersonRef } from './account-view';
import { audit } from './audit';
import type { EventHub } from './event-hub';
import { Conflict, NotFound } from './service-error';

/** Line maps that recognise a bench by its channel names. */
export class PresetService {
  constructor(
    private readonly store: Store,
    private readonly events: EventHub,
  ) {}

  async list(viewer: Account): Promise<PresetView[]> {
    const presets = await this.store.reader.find(Preset, {
      relations: { owner: true },
      order: { name: 'ASC' },
    });
    return presets.map((preset) => toPresetView(preset, viewer));
  }

  /** Presets whose channels are all there, the most telling first. */
  async matching(viewer: Account, names: readonly string[]): Promise<PresetView[]> {
    const known = new Set(names);
    return (await this.list(viewer))
      .filter(({ channels }) => channels.every((channel) => known.has(channel)))
      .sort((a, b) => b.channels.length - a.channels.length);
  }

  async create(by: Account, input: z.output<typeof newPresetSchema>): Promise<PresetView> {
    const preset = await this.store.write(async (manager) => {
      await refuseSameName(manager, input.name);
      const made = await manager.save(Preset, { ...input, ownerId: by.id, createdAt: Date.now() });
      await audit(manager, by, 'preset.created', made.name);
      return made;
    });
    this.events.publish({ kind: 'preset', id: preset.id });
    return toPresetView({ ...preset, owner: by }, by);
  }

  async remove(by: Account, id: number): Promise<void> {
    await this.store.write(async (manager) => {
      const preset = await findPreset(manager, id);
      await manager.delete(Preset, id);
      await audit(manager, by, 'preset.deleted', preset.name);
    });
    this.events.publish({ kind: 'preset', id });
  }

  async ownerOf(id: number): Promise<number> {
    return (await findPreset(this.store.reader, id)).ownerId;
  }
}

async function findPreset(manager: EntityManager, id: number): Promise<Preset> {
  const preset = await manager.findOneBy(Preset, { id });
  if (preset === null) throw new NotFound('This preset');
  return preset;
}

async function refuseSameName(manager: EntityManager, name: string): Promise<void> {
  if (!(await manager.existsBy(Preset, { name }))) return;
  throw new Conflict('name-taken', 'A preset of this name exists.', [
    { path: 'name', message: 'already in use' },
  ]);
}

function toPresetView(preset: Preset, viewer: Account): PresetView {
  return {
    id: preset.id,
    name: preset.name,
    channels: preset.channels,
    map: preset.map,
    options: preset.options,
    owner: toPersonRef(preset.owner),
    createdAt: new Date(preset.createdAt).toISOString(),
    mayDelete: mayTouch('DELETE /presets/:id', viewer, preset.ownerId),
  };
}
