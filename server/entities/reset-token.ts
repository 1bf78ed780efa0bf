import { Column, Entity, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import { Account } from './account';

/** A link that lets a person choose a password once. Without an account: the link that makes the first admin. */
@Entity('reset_token')
export class ResetToken {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Column({ type: 'text', unique: true })
  hash!: string;

  @Column({ type: 'integer', nullable: true })
  accountId!: number | null;

  @ManyToOne(() => Account, { onDelete: 'CASCADE', nullable: true })
  @JoinColumn({ name: 'accountId' })
  account!: Relation<Account> | null;

  @Column({ type: 'integer' })
  expiresAt!: number;

  @Column({ type: 'integer', nullable: true })
  usedAt!: number | null;
}
