import type { Role } from '#shared/contracts/session.ts';

export interface Area {
  name: AreaName;
  label: string;
  to: string;
  roles: readonly Role[];
}

export type AreaName =
  'my-flights' | 'airframes' | 'analysis' | 'scenarios' | 'classes' | 'assignments' | 'records' | 'administration';

const EVERYONE: readonly Role[] = ['trainee', 'instructor', 'engineer', 'administrator'];

/** Areas in the order of the navigation ruler. */
export const AREAS: readonly Area[] = [
  { name: 'my-flights', label: 'My flights', to: '/my-flights', roles: ['trainee', 'instructor'] },
  { name: 'airframes', label: 'Airframes', to: '/airframes', roles: ['engineer', 'instructor'] },
  { name: 'analysis', label: 'Analysis', to: '/analysis', roles: ['engineer', 'instructor'] },
  { name: 'scenarios', label: 'Scenarios', to: '/scenarios', roles: EVERYONE },
  { name: 'classes', label: 'Live class', to: '/classes', roles: ['trainee', 'instructor', 'administrator'] },
  { name: 'assignments', label: 'Assignments', to: '/assignments', roles: ['instructor', 'administrator'] },
  { name: 'records', label: 'Records', to: '/records', roles: ['trainee', 'instructor', 'administrator'] },
  { name: 'administration', label: 'Administration', to: '/administration', roles: ['administrator'] },
];

export function areasFor(roles: readonly Role[]): Area[] {
  return AREAS.filter((area) => area.roles.some((role) => roles.includes(role)));
}

/** Where a person starts: a trainee with the flights, an engineer with the airframes, others with the scenarios. */
export function homeFor(roles: readonly Role[]): string {
  if (roles.includes('trainee')) return '/my-flights';
  if (roles.includes('engineer') && !roles.includes('instructor')) return '/airframes';
  return '/scenarios';
}

const ROLE_WORDS: Readonly<Record<Role, string>> = {
  trainee: 'trainee',
  instructor: 'instructor',
  engineer: 'engineer',
  administrator: 'administrator',
};

/** "Instructor, engineer". */
export function roleWords(roles: readonly Role[]): string {
  const words = EVERYONE.filter((role) => roles.includes(role)).map((role) => ROLE_WORDS[role]);
  const text = words.join(', ');
  return text.charAt(0).toUpperCase() + text.slice(1);
}
