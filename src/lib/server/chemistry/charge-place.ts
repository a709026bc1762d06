import { givenText } from '../../domain/given-text';
import { knownCharge, type PanelAnalyte } from './panel-analyte';
import { mostNeutral, phWindows, type PhRange, type PhWindow } from './ph-windows';
import { shareText, shortText } from './text';

/** The groups of a panel by charge: every analyte stands in one of them. */
export type ChargeKey = 'neutral' | 'acid' | 'base' | 'both' | 'charged' | 'unknown';

/**
 * The group of charge that an analyte stands in within a working range, with the figures that put it there.
 * @param share what counts as neutral, or as charged, 0 to 1
 */
export function placeByCharge(
  analyte: PanelAnalyte,
  range: PhRange,
  share: number
): { readonly key: ChargeKey; readonly evidence: string } {
  const charge = knownCharge(analyte);
  if (!charge.known) return { key: 'unknown', evidence: charge.why };
  const { groups, hasPka, possible } = charge;
  if (groups.permanentCharge !== 0) {
    const sign = groups.permanentCharge > 0 ? '+' : '';
    return { key: 'charged', evidence: `permanent charge ${sign}${givenText(groups.permanentCharge)}` };
  }
  const unsure = possible.length > 0 ? `; the structure shows ${possible.join(' and ')} without a pKa` : '';
  if (!hasPka) return { key: 'neutral', evidence: `no pKa on file, taken to have no group${unsure}` };
  const values = `${pkaText(analyte)}${unsure}`;
  const neutral = phWindows(groups, 'neutral', share, range)[0];
  if (neutral && !neutral.lowIsEdge && !neutral.highIsEdge) return { key: 'neutral', evidence: values };
  const percent = shareText(share);
  if (neutral)
    return { key: keyOf(neutral), evidence: `${values}; ${percent} neutral ${windowText(neutral)}` };
  const bothKinds = groups.acids.length > 0 && groups.bases.length > 0;
  const most = mostNeutral(groups, range);
  if (most.share <= 1 - share && !bothKinds) {
    return { key: 'charged', evidence: `${values}; at least ${percent} charged throughout` };
  }
  return {
    key: bothKinds ? 'both' : groups.acids.length > 0 ? 'acid' : 'base',
    evidence: `${values}; ${mostText(most.share)} neutral at the most, at pH ${shortText(most.ph)}`
  };
}

/** Cut and not rounded: 98.97 % must not read as 99 %. */
function mostText(share: number): string {
  const percent = Math.floor(1000 * share) / 10;
  return percent < 0.1 ? 'less than 0.1 %' : `${givenText(percent)} %`;
}

function keyOf({ lowIsEdge, highIsEdge }: PhWindow): ChargeKey {
  return lowIsEdge && highIsEdge ? 'both' : highIsEdge ? 'acid' : 'base';
}

/** Rounded towards the inside, so that the pH that is read off keeps the promise. */
function windowText({ low, high, lowIsEdge, highIsEdge }: PhWindow): string {
  const from = (Math.ceil(low * 100) / 100).toFixed(2);
  const to = (Math.floor(high * 100) / 100).toFixed(2);
  return lowIsEdge && highIsEdge
    ? `from pH ${from} to ${to}`
    : highIsEdge
      ? `below pH ${to}`
      : `above pH ${from}`;
}

function pkaText({ pkaAcid, pkaBase }: PanelAnalyte): string {
  const list = (values: readonly number[]) => values.map(givenText).join(', ');
  return [
    ...(pkaAcid.length > 0 ? [`acid pKa ${list(pkaAcid)}`] : []),
    ...(pkaBase.length > 0 ? [`base pKa ${list(pkaBase)}`] : [])
  ].join(', ');
}
