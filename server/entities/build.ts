import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import { Account } from './account';
import { Device } from './device';

/** One firmware build or hardware revision of a device. */
@Entity('build')
@Index(['deviceId', 'name'], { unique: true })
export class Build {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Column({ type: 'integer' })
  deviceId!: number;

  @ManyToOne(() => Device, (device) => device.builds, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'deviceId' })
  device!: Relation<Device>;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text' })
  board!: string;

  @Column({ type: 'text' })
  notes!: string;

  @Column({ type: 'integer' })
  createdById!: number;

  @ManyToOne(() => Account, { onDelete: 'RESTRICT' })
  @JoinColumn({ name: 'createdById' })
  createdBy!: Relation<Account>;

  @Column({ type: 'integer' })
  createdAt!: number;
}
