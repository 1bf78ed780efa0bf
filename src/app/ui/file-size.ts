import type { PipeTransform } from '@angular/core';
import { Pipe } from '@angular/core';

/** Bytes as people say them, in powers of ten: 512 B, 18.2 MB. */
export function fileSize(bytes: number): string {
  if (bytes < 1000) return `${bytes} B`;
  if (bytes < 1e6) return `${(bytes / 1e3).toFixed(1)} kB`;
  if (bytes < 1e9) return `${(bytes / 1e6).toFixed(1)} MB`;
  return `${(bytes / 1e9).toFixed(2)} GB`;
}

@Pipe({ name: 'fileSize' })
export class FileSize implements PipeTransform {
  transform(bytes: number): string {
    return fileSize(bytes);
  }
}
