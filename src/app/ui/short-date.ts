import type { PipeTransform } from '@angular/core';
import { Pipe } from '@angular/core';

const DAY_MS = 86_400_000;

/** A date as people say it: a time today, Yesterday, 14 Oct, 14 Oct 2024. The full form belongs in a tooltip. */
export function shortDate(iso: string, now = new Date()): string {
  const date = new Date(iso);
  const midnight = new Date(now.getFullYear(), now.getMonth(), now.getDate()).getTime();
  const time = date.getTime();
  if (time >= midnight && time < midnight + DAY_MS) {
    return date.toLocaleTimeString('en-GB', { hour: '2-digit', minute: '2-digit' });
  }
  if (time >= midnight - DAY_MS && time < midnight) return 'Yesterday';
  const isThisYear = date.getFullYear() === now.getFullYear();
  return date.toLocaleDateString('en-GB', {
    day: 'numeric',
    month: 'short',
    ...(isThisYear ? {} : { year: 'numeric' }),
  });
}

/** Date, time and zone in words. */
export function longDate(iso: string): string {
  return new Date(iso).toLocaleString('en-GB', { dateStyle: 'long', timeStyle: 'long' });
}

@Pipe({ name: 'shortDate' })
export class ShortDate implements PipeTransform {
  transform(iso: string): string {
    return shortDate(iso);
  }
}

@Pipe({ name: 'longDate' })
export class LongDate implements PipeTransform {
  transform(iso: string): string {
    return longDate(iso);
  }
}
