import { figureText } from '../../../domain/figure-text';
import { givenText } from '../../../domain/given-text';
import type { SampleFormatView } from '../../../views/panel-chemistry';
import { sampleFormat, type SampleFormat } from '../../chemistry';

const preFilters: Readonly<Record<SampleFormat['preFilter'], string>> = {
  no: 'no pre-filter',
  perhaps: 'perhaps a pre-filter',
  yes: 'a pre-filter',
  'not known': 'whether a pre-filter is needed is not known'
};

const volumeText = (volumeMl: number): string =>
  volumeMl >= 1000 ? `${givenText(volumeMl / 1000)} L` : `${givenText(volumeMl)} mL`;

/** What volume and suspended solids say of the sample's format; a question and no rule. */
export function sampleFormatView(volumeMl: number, suspendedSolidsMgL: number | null): SampleFormatView {
  const found = sampleFormat({ volumeMl, suspendedSolidsMgL });
  const what = suspendedSolidsMgL === null ? '' : ` with ${givenText(suspendedSolidsMgL)} mg/L of solids`;
  const minutes = found.loadingMinutes;
  const time =
    minutes === null
      ? ''
      : ` Loading would take ${figureText(minutes.low, 2)} to ${figureText(minutes.high, 2)} minutes.`;
  const sentence =
    found.format === 'neither'
      ? `For ${volumeText(volumeMl)}${what} neither cartridge nor disk is usual.`
      : `For ${volumeText(volumeMl)}${what}: a ${found.format} (${found.size}), ${preFilters[found.preFilter]}.${time}`;
  return { volumeMl, suspendedSolidsMgL, sentence, findings: found.findings };
}
