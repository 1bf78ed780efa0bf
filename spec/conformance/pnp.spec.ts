import { describe, expect, it } from 'vitest';
import { parsePnp } from '#shared/resets/parse-pnp';

const bytes = (hex: string): number[] =>
  hex
    .trim()
    .split(/\s+/)
    .map((byte) => parseInt(byte, 16));

describe('identification strings', () => {
  it('Table 3: six-bit form without options', () => {
    // Source: Plug and Play External COM Device Specification 1.00 (28 Feb 1995), Table 3; the Other ID 4D stands before.
    const pnp = parsePnp(bytes('08 00 01 21 2D 23 11 12 13 14 09'));
    expect(pnp).toMatchObject({
      form: 6,
      isComplete: true,
      revision: 1,
      checksumSent: null,
      checksumComputed: null,
    });
    expect(pnp.eisaId?.text).toBe('AMC');
    expect(pnp.productId?.text).toBe('1234');
    expect(pnp.deviations.map(({ rule }) => rule)).toEqual(['IDN-4']);
  });

  it('Table 4: seven-bit form with all fields, checksum C4', () => {
    // Source: the same, Table 4.
    const pnp = parsePnp(
      bytes(
        '28 01 24 4D 44 43 30 32 38 38 5C 30 30 33 31 34 31 35 39 5C 4D 4F 44 45 4D 5C 4D 44 43 30 31 34 34 2C 41 54 4D 30 30 39 36 5C 5A 49 50 20 32 38 38 43 34 29',
      ),
    );
    expect(pnp).toMatchObject({
      form: 7,
      isComplete: true,
      revision: 100,
      checksumSent: 'C4',
      checksumComputed: 'C4',
    });
    expect(pnp.serialNumber?.text).toBe('00314159');
    expect(pnp.className?.text).toBe('MODEM');
    expect(pnp.driverId?.text).toBe('MDC0144,ATM0096');
    expect(pnp.userName?.text).toBe('ZIP 288');
    expect(pnp.deviations).toEqual([]);
  });

  it('sums the bytes as sent, offset form included', () => {
    // Source: the published corrections (modulo 256); example 4 of protocol-facts 4.3: sum 65Ah, "5A".
    const pnp = parsePnp(
      bytes(
        '08 01 24 3A 3A 3A 10 21 10 11 3C 10 10 10 10 10 10 10 11 3C 2D 2F 35 33 25 3C 30 2E 30 10 26 10 23 3C 24 25 2D 2F 00 12 00 22 35 34 34 2F 2E 15 21 09',
      ),
    );
    expect(pnp).toMatchObject({ checksumSent: '5A', checksumComputed: '5A', deviations: [] });
    expect(pnp.userName?.text).toBe('DEMO 2 BUTTON');
  });

  it('takes an absent field followed by a present one as a lone separator', () => {
    // Source: example 5 of protocol-facts 4.3.
    const pnp = parsePnp(
      bytes(
        '08 01 24 3A 3A 3A 10 21 10 13 3C 3C 2D 2F 35 33 25 3C 30 2E 30 10 26 10 21 0C 30 2E 30 10 26 10 23 3C 10 19 09',
      ),
    );
    expect(pnp.serialNumber).toBeNull();
    expect(pnp.className?.text).toBe('MOUSE');
    expect(pnp.driverId?.text).toBe('PNP0F0A,PNP0F0C');
    expect(pnp).toMatchObject({ checksumSent: '09', checksumComputed: '09', deviations: [] });
  });

  it('tells a wrong checksum, bit 6 in the six-bit form, a string that breaks off', () => {
    expect(
      parsePnp(bytes('08 01 24 3A 3A 3A 10 21 10 13 3C 3C 2D 10 10 09')).deviations.map(({ rule }) => rule),
    ).toEqual(['IDN-2']);
    expect(parsePnp(bytes('08 01 24 7A 3A 3A 10 21 10 13 09')).deviations.map(({ rule }) => rule)).toContain(
      'IDN-8',
    );
    expect(parsePnp(bytes('08 01 24 3A 3A')).deviations.map(({ rule }) => rule)).toContain('IDN-1');
  });
});
