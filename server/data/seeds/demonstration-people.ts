import type { Role } from '#shared/contracts/session.ts';

/** The invented organisation. Every name is invented; addresses end in .example, which no mail reaches. */
export const DEMONSTRATION = {
  slug: 'field-school',
  name: 'Field School of Flight',
  cohort: '26-A',
  /** Password of all demonstration people; printed at start and in the README. */
  password: 'balanced-line-26',
  domain: 'fieldschool.example',
} as const;

export interface DemonstrationPerson {
  mailbox: string;
  displayName: string;
  fullName: string;
  roles: Role[];
}

const person = (mailbox: string, displayName: string, fullName: string, role: Role): DemonstrationPerson => ({
  mailbox,
  displayName,
  fullName,
  roles: [role],
});

export const DEMONSTRATION_PEOPLE: readonly DemonstrationPerson[] = [
  person('s.virtanen', 'S. Virtanen', 'Sanna Virtanen', 'administrator'),
  person('a.reyes', 'A. Reyes', 'Alma Reyes', 'engineer'),
  person('m.okafor', 'M. Okafor', 'Martin Okafor', 'instructor'),
  person('h.brandt', 'H. Brandt', 'Hanna Brandt', 'instructor'),
  person('j.lindqvist', 'J. Lindqvist', 'Jonas Lindqvist', 'trainee'),
  person('a.bauer', 'A. Bauer', 'Anja Bauer', 'trainee'),
  person('s.chandran', 'S. Chandran', 'Suresh Chandran', 'trainee'),
  person('l.dubois', 'L. Dubois', 'Lucie Dubois', 'trainee'),
  person('t.eriksen', 'T. Eriksen', 'Tor Eriksen', 'trainee'),
  person('h.farouk', 'H. Farouk', 'Hana Farouk', 'trainee'),
  person('r.greene', 'R. Greene', 'Robin Greene', 'trainee'),
  person('p.moreau', 'P. Moreau', 'Paul Moreau', 'trainee'),
  person('k.nowak', 'K. Nowak', 'Kinga Nowak', 'trainee'),
  person('d.santos', 'D. Santos', 'Diego Santos', 'trainee'),
  person('y.tanaka', 'Y. Tanaka', 'Yui Tanaka', 'trainee'),
  person('e.weiss', 'E. Weiss', 'Emil Weiss', 'trainee'),
];
