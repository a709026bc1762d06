import type { NavigationGroup } from '$lib/components/shell/study-groups';

interface Counts {
  readonly panel: number;
  readonly variants: number;
  readonly experiments: number;
  readonly calibrationSets: number;
  readonly imports: number;
}

/** The pages of a study in their five groups. */
export function studyPages(code: string, counts: Counts): readonly NavigationGroup[] {
  const base = `/studies/${code}`;
  const some = (count: number): number | undefined => (count > 0 ? count : undefined);
  return [
    { group: 'Overview', items: [{ href: base, label: 'Stages' }] },
    {
      group: 'Plan',
      items: [
        { href: `${base}/aim`, label: 'Aim and criteria' },
        { href: `${base}/panel`, label: 'Panel and chemistry', count: some(counts.panel) },
        { href: `${base}/variants`, label: 'Variants', count: some(counts.variants) }
      ]
    },
    {
      group: 'Bench',
      items: [
        { href: `${base}/experiments`, label: 'Experiments', count: some(counts.experiments) },
        { href: `${base}/data`, label: 'Data in', count: some(counts.imports) },
        { href: `${base}/calibration`, label: 'Calibration', count: some(counts.calibrationSets) }
      ]
    },
    {
      group: 'Findings',
      items: [
        { href: `${base}/balance`, label: 'Mass balance' },
        { href: `${base}/walk-back`, label: 'Walk-back' },
        { href: `${base}/compare`, label: 'Compare' }
      ]
    },
    {
      group: 'Record',
      items: [
        { href: `${base}/validation`, label: 'Validation' },
        { href: `${base}/summary`, label: 'Summary' },
        { href: `${base}/history`, label: 'History' }
      ]
    }
  ];
}
