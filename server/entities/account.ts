import { Column, Entity, PrimaryGeneratedColumn } from 'typeorm';
import type { Preferences, Role } from '#shared/contract/http/accounts';

/** A person who may sign in. */
@Entity('account')
export class Account {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  /** Lower case. */
  @Column({ type: 'text', unique: true })
  email!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text' })
  role!: Role;

  @Column({ type: 'boolean', default: true })
  isActive!: boolean;

  /** bcrypt; null until the person has chosen a password. */
  @Column({ type: 'text', nullable: true })
  passwordHash!: string | null;

  @Column({ type: 'simple-json' })
  preferences!: Preferences;

  /** Access tokens of an earlier epoch open nothing: it counts up when all sessions end. */
  @Column({ type: 'integer', default: 0 })
  tokenEpoch!: number;

  /** Milliseconds since 1970, as all instants in the store. */
  @Column({ type: 'integer' })
  createdAt!: number;

  @Column({ type: 'integer', nullable: true })
  lastSeenAt!: number | null;
}
