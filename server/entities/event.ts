import { Column, Entity, Index, PrimaryGeneratedColumn } from 'typeorm';

/** A line of the audit trail: who did what to what. Names are kept as they were. */
@Entity('event')
export class Event {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Index()
  @Column({ type: 'integer' })
  at!: number;

  @Column({ type: 'integer', nullable: true })
  accountId!: number | null;

  @Column({ type: 'text' })
  who!: string;

  /** `capture.uploaded`, `person.deactivated` … */
  @Column({ type: 'text' })
  what!: string;

  @Column({ type: 'text' })
  subject!: string;

  @Column({ type: 'simple-json' })
  details!: Record<string, unknown>;
}
