import { Column, Entity, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import type { DecodeOptionsDocument } from '#shared/contract/http/decodes';
import type { LineMapDocument } from '#shared/contract/line-map-document';
import { Account } from './account';

/** A line map that recognises a bench by its channel names. */
@Entity('preset')
export class Preset {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Column({ type: 'text', unique: true })
  name!: string;

  @Column({ type: 'simple-json' })
  channels!: string[];

  @Column({ type: 'simple-json' })
  map!: LineMapDocument;

  @Column({ type: 'simple-json' })
  options!: DecodeOptionsDocument;

  @Column({ type: 'integer' })
  ownerId!: number;

  @ManyToOne(() => Account, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'ownerId' })
  owner!: Relation<Account>;

  @Column({ type: 'integer' })
  createdAt!: number;
}
