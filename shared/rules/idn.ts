import type { PnpDeviation } from '../resets/pnp-string';
import type { Reset } from '../resets/reset';
import type { Place, RuleContext, RuleOutcome } from './rule-context';
import { cap, figure, notApplicable, notShown, plural } from './rule-context';
import { judgeAtMost } from './verdict';

function withString(context: RuleContext): readonly Reset[] {
  return context.decoded.resets.filter((reset) => reset.pnp !== null);
}

/** IDN rules have no meaning without Begin PnP; without a reset nobody can tell. */
function lacks(context: RuleContext): RuleOutcome | undefined {
  if (context.rts === undefined)
    return notShown('RTS is not in the capture: record RTS beside the data line');
  if (context.decoded.resets.length === 0) return notShown('RTS never goes from OFF to ON in the capture');
  if (context.decoded.resets.every((reset) => reset.replyTicks === null)) {
    return notShown('no reset was answered, so nobody knows whether a PnP string would come');
  }
  if (withString(context).length === 0) return notApplicable('no reply carries a PnP string');
  return undefined;
}

/** IDN-1 … IDN-5, IDN-8: deviations of the string from the grammar that belong to the rule. */
export function judgeDeviations(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const rule = context.definition.id;
  const resets = withString(context);
  const { characters } = context.decoded;
  const places: Place[] = resets.flatMap((reset) =>
    reset
      .pnp!.deviations.filter((deviation) => deviation.rule === rule)
      .map((deviation) => {
        const begin = reset.identification.length - reset.pnp!.raw.length;
        const index =
          reset.identification[Math.min(reset.identification.length - 1, begin + (deviation.offset ?? 0))];
        return {
          verdict: 'violation' as const,
          severity: isOtherRevision(deviation, reset) ? ('warning' as const) : undefined,
          startTicks: characters.startTicks[index],
          endTicks: characters.endTicks[index],
          message: `${deviation.message.charAt(0).toUpperCase()}${deviation.message.slice(1)}`,
        };
      }),
  );
  if (rule === 'IDN-8' && resets.every((reset) => reset.pnp!.form === 7)) {
    return notApplicable('the string has the 7-bit form');
  }
  if (rule === 'IDN-2' && places.length === 0) {
    const checked = resets.filter((reset) => reset.pnp!.checksumComputed !== null);
    if (checked.length === 0 && resets.some((reset) => !reset.pnp!.isComplete)) {
      return notShown('the string breaks off before its End, so its checksum is not known');
    }
    if (checked.length === 0) {
      return notApplicable('the string has no optional field, so it carries no checksum');
    }
  }
  const isOnlyRevision = places.length > 0 && places.every((place) => place.severity === 'warning');
  return {
    verdict: places.length === 0 ? 'pass' : 'violation',
    severity: isOnlyRevision ? 'warning' : undefined,
    n: resets.length,
    reason:
      places.length === 0
        ? `${plural(resets.length, 'PnP string')} without a deviation`
        : places[0].message + (places.length > 1 ? `, and ${places.length - 1} more` : ''),
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** Another valid revision than 1.00 only warns. Source: rules.md 3, IDN-4. */
function isOtherRevision(deviation: PnpDeviation, reset: Reset): boolean {
  return (
    deviation.rule === 'IDN-4' &&
    reset.pnp!.revision !== null &&
    reset.pnp!.raw[1] <= 0x3f &&
    reset.pnp!.raw[2] <= 0x3f
  );
}

/** Longest time from the first start to End PnP, seconds. Source: protocol-facts 3.3, host F. */
const WHOLE_STRING_S = 2.2;

/** IDN-6: end → start of characters, and first start → End PnP. */
export function judgeStringTiming(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { startTicks, endTicks } = context.decoded.characters;
  const limit = context.ticksOfMs(context.limit);
  const whole = context.ticksOfMs(WHOLE_STRING_S * 1e3);
  const places: Place[] = [];
  let worst = 0;
  for (const reset of withString(context)) {
    const list = reset.identification;
    for (let k = 1; k < list.length; k++) {
      const gap = Math.max(0, startTicks[list[k]] - endTicks[list[k] - 1]);
      worst = Math.max(worst, gap);
      const verdict = judgeAtMost(
        gap,
        context.differenceUncertainty(gap, 'data'),
        limit,
        context.setting.decision,
      );
      if (verdict !== 'pass') {
        places.push({
          verdict,
          startTicks: endTicks[list[k] - 1],
          endTicks: startTicks[list[k]],
          measured: context.ms(gap),
          uncertainty: context.ms(context.differenceUncertainty(gap, 'data')),
          message: `A pause of ${figure(context.ms(gap))} ms inside the PnP string, limit ${figure(context.limit)} ms`,
        });
      }
    }
    const length = endTicks[list[list.length - 1]] - startTicks[list[0]];
    const verdict = judgeAtMost(
      length,
      context.differenceUncertainty(length, 'data'),
      whole,
      context.setting.decision,
    );
    if (verdict === 'pass') continue;
    places.push({
      verdict,
      startTicks: startTicks[list[0]],
      endTicks: endTicks[list[list.length - 1]],
      measured: context.ms(length),
      uncertainty: context.ms(context.differenceUncertainty(length, 'data')),
      limit: WHOLE_STRING_S * 1e3,
      message: `The whole reply takes ${figure(context.ms(length))} ms, limit ${figure(WHOLE_STRING_S * 1e3)} ms`,
    });
  }
  const hasViolation = places.some((place) => place.verdict === 'violation');
  // Where only the whole string is too long, its length is the figure.
  const shown = places.find((place) => place.verdict === (hasViolation ? 'violation' : 'inconclusive'));
  if (shown?.limit !== undefined) {
    return {
      verdict: shown.verdict,
      n: withString(context).length,
      measured: shown.measured,
      uncertainty: shown.uncertainty,
      uncertaintyKind: 'bound',
      limit: shown.limit,
      reason: shown.message,
      findings: cap(places.map((place) => context.finding(place))),
    };
  }
  return {
    verdict: hasViolation ? 'violation' : places.length > 0 ? 'inconclusive' : 'pass',
    n: withString(context).length,
    measured: context.ms(worst),
    uncertainty: context.ms(context.differenceUncertainty(worst, 'data')),
    uncertaintyKind: 'bound',
    reason: `the longest pause inside the string is ${figure(context.ms(worst))} ms`,
    findings: cap(places.map((place) => context.finding(place))),
  };
}

/** Compatible ids and the packets they promise. Source: protocol-facts 4.2, as mapped by hosts B and C. */
const PROMISES: Record<string, readonly string[]> = {
  PNP0F01: ['M', 'M-null'],
  PNP0F0A: ['M', 'M-null', 'M3', 'MZ'],
  PNP0F0B: ['M', 'M3'],
  PNP0F0C: ['M', 'M-null', 'M3'],
  PNP0F08: ['M3'],
  PNP0F17: ['M3'],
  PNP0F09: ['M', 'M3'],
  PNP0F0F: ['M', 'M3'],
  PNP0F04: ['five-byte'],
  PNP0F05: ['five-byte'],
};

/** IDN-7: compatible ids fit the packets seen. */
export function judgeCompatibleIds(context: RuleContext): RuleOutcome {
  const missing = lacks(context);
  if (missing !== undefined) return missing;
  const { protocol, packets } = context.decoded;
  const ids = withString(context)
    .flatMap((reset) => (reset.pnp!.driverId?.text ?? '').split(','))
    .filter((id) => id !== '');
  if (ids.length === 0) return notApplicable('the string names no compatible id');
  if (protocol === null || packets.count === 0)
    return notShown('there are no packets to compare the compatible ids with');
  const known = [...new Set(ids)].map((id) => id.replace(/^\*/, '')).filter((id) => id in PROMISES);
  if (known.length === 0) return notShown(`no packets are known for ${ids.join(', ')}`);
  const fits = known.some((id) => PROMISES[id].includes(protocol));
  return {
    verdict: fits ? 'pass' : 'violation',
    n: known.length,
    reason: `${known.join(', ')} ${fits ? 'fits' : 'does not fit'} packets of ${protocol}`,
  };
}
