import type { Role } from '../src/lib/domain/roles';

/** A person who can sign in to try the program. Invented, like the labs. */
export interface DemoAccount {
  readonly lab: string;
  readonly role: Role;
  readonly name: string;
  readonly email: string;
  readonly password: string;
}

export const demoLabName = 'Fennick Weir Laboratory';
/** A second lab, so that what belongs to one can be seen to be invisible to the other. */
export const secondLabName = 'Pellow Bay Laboratory';

export const demoAccounts: readonly DemoAccount[] = [
  {
    lab: demoLabName,
    role: 'chemist',
    name: 'Ines Marlow',
    email: 'ines.marlow@fennick-weir.example',
    password: 'weir-chemist-4127'
  },
  {
    lab: demoLabName,
    role: 'analyst',
    name: 'Tobias Renn',
    email: 'tobias.renn@fennick-weir.example',
    password: 'weir-analyst-5583'
  },
  {
    lab: demoLabName,
    role: 'manager',
    name: 'Greta Holm',
    email: 'greta.holm@fennick-weir.example',
    password: 'weir-manager-9016'
  },
  {
    lab: demoLabName,
    role: 'reviewer',
    name: 'Samir Vance',
    email: 'samir.vance@fennick-weir.example',
    password: 'weir-reviewer-2748'
  },
  {
    lab: secondLabName,
    role: 'manager',
    name: 'Nora Pell',
    email: 'nora.pell@pellow-bay.example',
    password: 'bay-manager-6639'
  }
];
