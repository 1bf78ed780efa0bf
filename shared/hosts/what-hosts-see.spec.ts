import { describe, expect, it } from 'vitest';
import { CaptureReader } from '../capture/read-capture';
import { compose } from '../composer/compose';
import type { Step } from '../composer/script';
import { writeVcd } from '../composer/write-vcd';
import { decode } from '../decode/decode';
import { secondsPerTick } from '../time/time-base';
import { KNOWN_HOSTS } from './known-hosts';
import type { HostView } from './what-hosts-see';
import { whatHostsSee } from './what-hosts-see';

type ResetStep = Extract<Step, { do: 'reset' }>;

/** The sights of all hosts, by id, of a device that goes through these resets. */
function seen(
  resets: readonly Partial<ResetStep>[],
  protocol: 'M' | 'M3' | 'MZ' = 'M3',
): Record<string, HostView> {
  const steps: Step[] = [{ do: 'wait', ms: 400 }];
  for (const reset of [{ widthMs: 50, latencyMs: 10 }, ...resets]) {
    steps.push({ do: 'reset', widthMs: 200, latencyMs: 12, ...reset }, { do: 'wait', ms: 400 });
  }
  steps.push({ do: 'draw', figure: 'circle', size: 200, packets: 30 });
  const reader = new CaptureReader();
  reader.push(new TextEncoder().encode([...writeVcd(compose({ name: 'hosts', protocol, steps }))].join('')));
  const decoded = decode(reader.finish());
  const views = whatHostsSee({
    tickS: secondsPerTick(decoded.capture.timeBase),
    characters: decoded.characters,
    resets: decoded.resets,
  });
  return Object.fromEntries(views.map((view) => [view.host.id, view]));
}

describe('what hosts see', () => {
  it('is said for every host that is known, in their order', () => {
    expect(Object.keys(seen([]))).toEqual(KNOWN_HOSTS.map(({ id }) => id));
  });

  // Source of the sequences and limits: protocol-facts.md 3.2.
  it('finds an M3 device by RTS alone and says as what', () => {
    const hosts = seen([{ widthMs: 200 }, { widthMs: 200 }]);
    expect(hosts['C']).toMatchObject({ outcome: 'found', as: 'M3', attempt: 1 });
    expect(hosts['E']).toMatchObject({ outcome: 'found', as: 'M', attempt: 1 });
  });

  it('is not shown where the sequence of the host was not recorded', () => {
    const hosts = seen([{ widthMs: 200 }]);
    for (const id of ['B', 'D', 'F', 'G']) expect(hosts[id].outcome).toBe('not-shown');
    expect(hosts['D'].why).toContain('by both lines');
  });

  it('is told by the user where a host does not look', () => {
    const hosts = seen([]);
    expect(hosts['A'].outcome).toBe('told');
    expect(hosts['H'].outcome).toBe('told');
  });

  it('finds a device that gets its supply back with both lines', () => {
    const hosts = seen(
      [
        { widthMs: 240, withDtr: true },
        { widthMs: 300, withDtr: true },
      ],
      'M',
    );
    expect(hosts['B']).toMatchObject({ outcome: 'found', as: 'M' });
    expect(hosts['D']).toMatchObject({ outcome: 'found', as: 'M' });
  });

  it('misses a two-button device where only three buttons are known without a string', () => {
    expect(seen([{ widthMs: 200 }], 'M')['C']).toMatchObject({ outcome: 'missed', as: null });
  });

  it('misses a reply that comes after the host has stopped waiting', () => {
    // 110 ms to the start edge and 7.5 ms to the end of the character: host G waits 110 ms.
    const late = seen([{ widthMs: 105, withDtr: true, latencyMs: 110 }], 'M');
    expect(late['G']).toMatchObject({ outcome: 'missed' });
    expect(late['G'].why).toContain('it waits 110.0 ms');
    const soon = seen([{ widthMs: 105, withDtr: true, latencyMs: 90 }], 'M');
    expect(soon['G']).toMatchObject({ outcome: 'found', as: 'M' });
  });

  it('counts resets: sometimes is not always', () => {
    const hosts = seen([{ widthMs: 200 }, { widthMs: 200, latencyMs: null }, { widthMs: 200 }]);
    expect(hosts['C'].outcome).toBe('sometimes');
    expect(hosts['C'].n - hosts['C'].found).toBe(1);
    expect(hosts['C'].why).toBe('the reset is not answered');
  });
});
