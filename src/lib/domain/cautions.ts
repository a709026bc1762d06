/** What every record that hands figures or procedures on has to say, in our own words. */
export const cautions: readonly string[] = [
  'Read the safety data sheet of every acid, base, solvent and standard first; wear what it asks for, keep to the hood, and send waste the way the site prescribes.',
  'What the program computes and suggests is for a qualified chemist to weigh. The text of the method and the requirements of the regulator and the accreditation body come before it.',
  'An acceptance rule is worth what its citation says: rules marked as from memory are to be verified in the document before use.'
];

/** How invented data are labelled on screens, in print and in exports. */
export const demoLabel = 'Invented demo data: no laboratory measured these figures';
