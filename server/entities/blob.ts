import { Column, Entity, PrimaryColumn } from 'typeorm';

/** One stored file, by its SHA-256; deleted with its last reference. */
@Entity('blob')
export class Blob {
  @PrimaryColumn({ type: 'text' })
  sha256!: string;

  @Column({ type: 'integer' })
  size!: number;

  @Column({ type: 'integer' })
  createdAt!: number;
}
