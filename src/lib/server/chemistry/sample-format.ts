import { documents, practice, type Finding } from './evidence';
import { notNegative, positive } from './guards';

export interface SampleFormatInput {
  readonly volumeMl: number;
  /** mg/L; null where it has not been measured. */
  readonly suspendedSolidsMgL: number | null;
}

export interface SampleFormat {
  readonly format: 'cartridge' | 'disk' | 'cartridge or disk' | 'neither';
  readonly size: string;
  readonly preFilter: 'no' | 'perhaps' | 'yes' | 'not known';
  /** Minutes the load takes at the flow rates that methods give for such a format. */
  readonly loadingMinutes: { readonly low: number; readonly high: number } | null;
  readonly findings: readonly Finding[];
}

// Common practice, no source.
const cartridgeMl = 500;
const largestDiskMl = 1000;
const clearMgL = 50;
const cloudyMgL = 500;
/** 1 %, as mg/L of water: the upper end of 3535A. */
const mostSolidsMgL = 10_000;
/** mL/min: 1694 loads at 5 to 10, 526 and 532 at about 20. */
const cartridgeRate = { low: 5, high: 20 };
/** 3535A: ten minutes per litre or more. */
const diskMinutesPerMl = 10 / 1000;
/** 525.2: about two hours per litre, by a slight vacuum. */
const slowMinutesPerMl = 120 / 1000;

/**
 * Cartridge or disk, its size and a pre-filter, from the volume and the suspended solids of a sample. Common practice but for what
 * the findings cite; a question to the chemist and no rule.
 * @param input volume in mL, suspended solids in mg/L
 * @throws ChemistryError for a volume that is not above zero or negative solids
 */
export function sampleFormat({ volumeMl, suspendedSolidsMgL }: SampleFormatInput): SampleFormat {
  positive(volumeMl, 'The sample volume');
  if (suspendedSolidsMgL !== null) notNegative(suspendedSolidsMgL, 'The suspended solids');
  if (suspendedSolidsMgL !== null && suspendedSolidsMgL > mostSolidsMgL) return tooMuch(suspendedSolidsMgL);
  const cloudy = suspendedSolidsMgL !== null && suspendedSolidsMgL > clearMgL;
  const format =
    volumeMl > cartridgeMl
      ? volumeMl > largestDiskMl || cloudy
        ? 'disk'
        : 'cartridge or disk'
      : cloudy && volumeMl > 100
        ? 'cartridge or disk'
        : 'cartridge';
  return {
    format,
    size: sizeOf(format, volumeMl, cloudy),
    preFilter: preFilterOf(suspendedSolidsMgL),
    loadingMinutes: {
      low: format === 'cartridge' ? volumeMl / cartridgeRate.high : volumeMl * diskMinutesPerMl,
      high: format === 'disk' ? volumeMl * slowMinutesPerMl : volumeMl / cartridgeRate.low
    },
    findings: [...formatFindings(format, volumeMl), ...solidsFindings(suspendedSolidsMgL)]
  };
}

function sizeOf(format: SampleFormat['format'], volumeMl: number, cloudy: boolean): string {
  const cartridge =
    volumeMl <= 100
      ? '60 to 200 mg in 3 mL'
      : volumeMl <= 500
        ? '200 to 500 mg in 6 mL'
        : '0.5 to 1 g in 6 to 20 mL';
  const disk = cloudy || volumeMl > largestDiskMl ? '90 mm' : '47 mm';
  if (format === 'cartridge') return cartridge;
  return format === 'disk' ? disk : `${cartridge}, or ${disk}`;
}

function preFilterOf(solids: number | null): SampleFormat['preFilter'] {
  if (solids === null) return 'not known';
  return solids <= clearMgL ? 'no' : solids <= cloudyMgL ? 'perhaps' : 'yes';
}

function formatFindings(format: SampleFormat['format'], volumeMl: number): readonly Finding[] {
  const findings: Finding[] = [];
  if (format !== 'cartridge') {
    findings.push({
      text:
        volumeMl > largestDiskMl
          ? 'Is the sample to be split, or is less of it enough?'
          : 'A disk of 47 or 90 mm takes this volume.',
      evidence: `Disks of 47 and 90 mm are meant for about 1 L, loaded in ten minutes per litre or more. Planned: ${volumeMl} mL.`,
      ...documents.solidPhase()
    });
  }
  if (format !== 'disk') {
    findings.push({
      text:
        volumeMl > cartridgeMl
          ? 'Does a cartridge hold the most hydrophilic of the panel over this volume?'
          : 'A cartridge takes this volume in good time.',
      evidence:
        'Published cartridges: 500 mg for 500 mL (532) and for 1 L (526), 1 g for 1 L (525.2, 1694), at 5 to 20 mL/min.',
      ...documents.drinkingWater('525.2, 526, 532 and 1694')
    });
  }
  return findings;
}

function solidsFindings(solids: number | null): readonly Finding[] {
  if (solids === null) {
    return [
      {
        text: 'How much suspended matter does the sample bring? Nothing is said of a pre-filter without it.',
        evidence: 'Suspended solids have not been given.',
        ...practice
      }
    ];
  }
  if (solids <= clearMgL) return [];
  return [
    {
      text: 'Would a glass-fibre filter, or a layer of filter aid on the bed, keep it from clogging? Is the filter then extracted as a fraction of its own?',
      evidence: `${solids} mg/L of suspended solids, above ${clearMgL}. What sorbs to particles stays on the filter.`,
      ...practice
    }
  ];
}

function tooMuch(solids: number): SampleFormat {
  return {
    format: 'neither',
    size: 'none',
    preFilter: 'yes',
    loadingMinutes: null,
    findings: [
      {
        text: 'Are solids and water to be extracted apart?',
        evidence: `${solids} mg/L of suspended solids. The method for solid-phase extraction of water ends at 1 %.`,
        ...documents.solidPhase()
      }
    ]
  };
}
