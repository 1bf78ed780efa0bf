import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import { Account } from './account';

/** One link of a chain of refresh tokens; a chain is one sign-in. */
@Entity('refresh_token')
export class RefreshToken {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  /** SHA-256 of the token: what is stored opens nothing. */
  @Column({ type: 'text', unique: true })
  hash!: string;

  @Index()
  @Column({ type: 'text' })
  chain!: string;

  @Column({ type: 'integer' })
  accountId!: number;

  @ManyToOne(() => Account, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'accountId' })
  account!: Relation<Account>;

  @Column({ type: 'integer' })
  expiresAt!: number;

  /** When it was exchanged for the next; null while it is the newest. */
  @Column({ type: 'integer', nullable: true })
  usedAt!: number | null;

  @Column({ type: 'integer', nullable: true })
  revokedAt!: number | null;
}
