import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const SHARED = fileURLToPath(new URL('../shared/', import.meta.url));

/** What a room of the library may import, itself left out. One way only: from bytes to findings. */
const ALLOWED: Record<string, readonly string[]> = {
  time: [],
  capture: ['time'],
  line: ['time', 'capture'],
  characters: ['time', 'line'],
  resets: ['time', 'line', 'characters'],
  packets: ['time', 'characters'],
  statistics: [],
  detection: ['time', 'capture', 'line', 'characters', 'resets', 'packets'],
  decode: ['time', 'capture', 'line', 'characters', 'resets', 'packets', 'statistics', 'detection'],
  rules: ['time', 'capture', 'line', 'characters', 'resets', 'packets', 'statistics', 'decode'],
  hosts: ['time', 'line', 'characters', 'resets', 'packets', 'decode'],
  power: ['statistics'],
  writers: [
    'time',
    'capture',
    'line',
    'characters',
    'resets',
    'packets',
    'statistics',
    'decode',
    'rules',
    'contract',
  ],
  composer: ['time', 'capture', 'line', 'characters', 'packets'],
};

/** Imports against the list, each with its reason. */
const EXCEPTIONS: Record<string, string> = {
  'writers → contract': 'the JSON writer makes the type the contract states; only the type is imported',
};

interface Import {
  readonly file: string;
  readonly room: string;
  readonly target: string;
  readonly isTypeOnly: boolean;
}

function importsOfShared(): Import[] {
  return readdirSync(SHARED, { recursive: true, encoding: 'utf8' })
    .filter((file) => file.endsWith('.ts') && !file.endsWith('.spec.ts'))
    .flatMap((file) => {
      const text = readFileSync(join(SHARED, file), 'utf8');
      return [...text.matchAll(/^(import|export)( type)? [^;]*?from '([^']+)';/gms)].map((match) => ({
        file,
        room: file.split('/')[0],
        target: match[3],
        isTypeOnly: match[2] !== undefined,
      }));
    });
}

function roomOf({ file, target }: Import): string {
  return relative(SHARED, resolve(SHARED, dirname(file), target)).split('/')[0];
}

describe('the rooms of the library', () => {
  const imports = importsOfShared();

  it('import only rooms before them', () => {
    const wrong = imports
      .filter((item) => item.target.startsWith('.') && item.room !== 'contract')
      .filter((item) => roomOf(item) !== item.room && !ALLOWED[item.room]?.includes(roomOf(item)))
      .map((item) => `${item.file} imports ${item.target}`);
    expect(wrong).toEqual([]);
  });

  it('import nothing from outside, but zod in contract', () => {
    const wrong = imports
      .filter((item) => !item.target.startsWith('.'))
      .filter((item) => !(item.room === 'contract' && item.target === 'zod'))
      .map((item) => `${item.file} imports ${item.target}`);
    expect(wrong).toEqual([]);
  });

  it('take no more than types from contract', () => {
    const wrong = imports
      .filter(
        (item) => item.target.startsWith('.') && item.room !== 'contract' && roomOf(item) === 'contract',
      )
      .filter((item) => !item.isTypeOnly)
      .map((item) => `${item.file} imports ${item.target}`);
    expect(wrong).toEqual([]);
    expect(Object.values(EXCEPTIONS).every((reason) => reason.length > 0)).toBe(true);
  });
});
