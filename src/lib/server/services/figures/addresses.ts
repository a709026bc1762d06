import { Invalid } from '../../errors';

/** The address of a figure, from which its provenance is opened. Panel entries, replicates and fractions by id. */
export type FigureAddress =
  | {
      readonly kind: 'recovery' | 'surrogate' | 'matrix' | 'relative' | 'calibration';
      readonly experiment: number;
      readonly entry: string;
    }
  | {
      readonly kind: 'fraction';
      readonly experiment: number;
      readonly entry: string;
      readonly fraction: string;
    }
  | {
      readonly kind: 'amount';
      readonly experiment: number;
      readonly entry: string;
      readonly replicate: string;
      /** 'whole' for what hangs on no fraction. */
      readonly fraction: string;
    }
  /** A figure of the validation; variant '-' for all. */
  | {
      readonly kind: 'demonstration' | 'confirmation' | 'detection' | 'precision' | 'blanks' | 'control';
      readonly variant: string;
      readonly entry: string;
    }
  | { readonly kind: 'duplicate'; readonly pair: string; readonly entry: string }
  | { readonly kind: 'loss'; readonly variant: string; readonly stage: string; readonly entry: string }
  | { readonly kind: 'open'; readonly variant: string; readonly entry: string };

/** Makes the link that opens an address on the page that shows the figure. */
export type Link = (address: FigureAddress) => string;

/** "recovery:3:<entry>", "amount:3:<entry>:<replicate>:<fraction>", "loss:D:drying:<entry>" … */
export function addressText(address: FigureAddress): string {
  switch (address.kind) {
    case 'fraction':
      return [address.kind, address.experiment, address.entry, address.fraction].join(':');
    case 'amount':
      return [address.kind, address.experiment, address.entry, address.replicate, address.fraction].join(':');
    case 'loss':
      return [address.kind, address.variant, address.stage, address.entry].join(':');
    case 'open':
    case 'demonstration':
    case 'confirmation':
    case 'detection':
    case 'precision':
    case 'blanks':
    case 'control':
      return [address.kind, address.variant, address.entry].join(':');
    case 'duplicate':
      return [address.kind, address.pair, address.entry].join(':');
    default:
      return [address.kind, address.experiment, address.entry].join(':');
  }
}

const uuid = '[0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12}';
const patterns = {
  plain: new RegExp(`^(recovery|surrogate|matrix|relative|calibration):(\\d{1,6}):(${uuid})$`),
  fraction: new RegExp(`^fraction:(\\d{1,6}):(${uuid}):(${uuid}|whole)$`),
  amount: new RegExp(`^amount:(\\d{1,6}):(${uuid}):(${uuid}):(${uuid}|whole)$`),
  loss: new RegExp(`^loss:([A-Za-z0-9]{1,8}):([a-z][a-z0-9-]{0,39}):(${uuid})$`),
  open: new RegExp(`^open:([A-Za-z0-9]{1,8}):(${uuid})$`),
  validation: new RegExp(
    `^(demonstration|confirmation|detection|precision|blanks|control):([A-Za-z0-9]{1,8}|-):(${uuid})$`
  ),
  duplicate: new RegExp(`^duplicate:(${uuid}):(${uuid})$`)
};

/** @throws Invalid for a text that is no address of a figure */
export function parseAddress(text: string): FigureAddress {
  const plain = patterns.plain.exec(text);
  if (plain) {
    const kind = plain[1] as 'recovery' | 'surrogate' | 'matrix' | 'relative' | 'calibration';
    return { kind, experiment: Number(plain[2]), entry: plain[3] ?? '' };
  }
  const fraction = patterns.fraction.exec(text);
  if (fraction) {
    return {
      kind: 'fraction',
      experiment: Number(fraction[1]),
      entry: fraction[2] ?? '',
      fraction: fraction[3] ?? ''
    };
  }
  const amount = patterns.amount.exec(text);
  if (amount) {
    const [, experiment, entry = '', replicate = '', of = ''] = amount;
    return { kind: 'amount', experiment: Number(experiment), entry, replicate, fraction: of };
  }
  const loss = patterns.loss.exec(text);
  if (loss) return { kind: 'loss', variant: loss[1] ?? '', stage: loss[2] ?? '', entry: loss[3] ?? '' };
  const open = patterns.open.exec(text);
  if (open) return { kind: 'open', variant: open[1] ?? '', entry: open[2] ?? '' };
  const validation = patterns.validation.exec(text);
  if (validation) {
    const kind = validation[1] as
      'demonstration' | 'confirmation' | 'detection' | 'precision' | 'blanks' | 'control';
    return { kind, variant: validation[2] ?? '', entry: validation[3] ?? '' };
  }
  const duplicate = patterns.duplicate.exec(text);
  if (duplicate) return { kind: 'duplicate', pair: duplicate[1] ?? '', entry: duplicate[2] ?? '' };
  throw Invalid.at('figure', 'This is not the address of a figure.', { found: text.slice(0, 120) });
}
