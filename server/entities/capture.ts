import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import type { AboutCapture, CaptureState } from '#shared/contract/http/captures';
import type { OverallVerdict } from '#shared/rules/finding';
import { Account } from './account';
import { Blob } from './blob';
import { Build } from './build';

/** An upload of a blob. Its id is the number people see: 412 is LW-0412. Ids are never used again. */
@Entity('capture')
export class Capture {
  @PrimaryGeneratedColumn('increment', { type: 'integer' })
  id!: number;

  @Column({ type: 'text' })
  fileName!: string;

  @Index()
  @Column({ type: 'text' })
  sha256!: string;

  @ManyToOne(() => Blob, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'sha256' })
  blob!: Relation<Blob>;

  @Index()
  @Column({ type: 'integer' })
  ownerId!: number;

  @ManyToOne(() => Account, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'ownerId' })
  owner!: Relation<Account>;

  @Index()
  @Column({ type: 'integer', nullable: true })
  buildId!: number | null;

  @ManyToOne(() => Build, { onDelete: 'RESTRICT', nullable: true })
  @JoinColumn({ name: 'buildId' })
  build!: Relation<Build> | null;

  @Column({ type: 'simple-json' })
  about!: AboutCapture;

  /** Of its latest decode job; kept here so that lists can filter by it. */
  @Index()
  @Column({ type: 'text' })
  state!: CaptureState;

  /** Of the latest check; null before it. Kept here for the same reason, like the next two. */
  @Column({ type: 'text', nullable: true })
  verdict!: OverallVerdict | null;

  /** Rules violated in the latest check. */
  @Column({ type: 'integer', default: 0 })
  violations!: number;

  /** Length of the record, seconds; null before the first decode. */
  @Column({ type: 'real', nullable: true })
  durationS!: number | null;

  @Index()
  @Column({ type: 'integer' })
  createdAt!: number;
}
