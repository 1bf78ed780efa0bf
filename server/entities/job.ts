import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import type { DecodeRequest } from '#shared/contract/http/decodes';
import type { JobProblem, JobView } from '#shared/contract/http/jobs';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import { Account } from './account';
import { Capture } from './capture';

/** What a job is asked to do. */
export type JobTask =
  | { readonly kind: 'decode'; readonly request: DecodeRequest }
  | { readonly kind: 'check'; readonly decodeId: number; readonly rulebook: RulebookKey };

/** A line of the durable queue: it outlives the process that works on it. */
@Entity('job')
export class Job {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Index()
  @Column({ type: 'integer' })
  captureId!: number;

  @ManyToOne(() => Capture, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'captureId' })
  capture!: Relation<Capture>;

  @Column({ type: 'simple-json' })
  task!: JobTask;

  @Index()
  @Column({ type: 'text' })
  state!: JobView['state'];

  /** Times it was begun: one retry after a crash. */
  @Column({ type: 'integer' })
  attempts!: number;

  @Column({ type: 'simple-json', nullable: true })
  problem!: JobProblem | null;

  @Column({ type: 'integer', nullable: true })
  decodeId!: number | null;

  @Column({ type: 'integer', nullable: true })
  checkId!: number | null;

  @Column({ type: 'integer' })
  accountId!: number;

  @ManyToOne(() => Account, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'accountId' })
  account!: Relation<Account>;

  @Column({ type: 'integer' })
  createdAt!: number;
}
