import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import type { DecodeRequest, DecodeSummary, DecodeView } from '#shared/contract/http/decodes';
import { Account } from './account';
import { Capture } from './capture';

/** What lists show of a decode; `marks` belong to the check. */
export type DecodeFigures = Omit<
  DecodeSummary,
  'id' | 'ordinal' | 'createdAt' | 'check' | 'toolVersion' | 'marks'
>;

/** What is told of a decode one by one. */
export type DecodeDetail = Pick<DecodeView, 'lines' | 'detections' | 'defectList'>;

/** One run of the library over a capture with one line map. Immutable. Its products lie in a folder beside the database. */
@Entity('decode')
@Index(['captureId', 'ordinal'], { unique: true })
export class Decode {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Column({ type: 'integer' })
  captureId!: number;

  @ManyToOne(() => Capture, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'captureId' })
  capture!: Relation<Capture>;

  @Column({ type: 'integer' })
  ordinal!: number;

  @Column({ type: 'simple-json' })
  request!: DecodeRequest;

  @Column({ type: 'simple-json' })
  figures!: DecodeFigures;

  /** Read only where one decode is shown. */
  @Column({ type: 'simple-json', select: false })
  detail!: DecodeDetail;

  /** Where its tape and table lie, below the data folder. */
  @Column({ type: 'text' })
  folder!: string;

  @Column({ type: 'text' })
  toolVersion!: string;

  @Column({ type: 'integer' })
  accountId!: number;

  @ManyToOne(() => Account, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'accountId' })
  account!: Relation<Account>;

  @Column({ type: 'integer' })
  createdAt!: number;
}
