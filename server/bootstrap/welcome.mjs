/** Roles and sign-ins of the invented organisation that an empty database is filled with. */
const SIGN_INS = [
  ['Trainee', 'j.lindqvist@fieldschool.example'],
  ['Instructor', 'm.okafor@fieldschool.example'],
  ['Engineer', 'a.reyes@fieldschool.example'],
  ['Administrator', 's.virtanen@fieldschool.example'],
];
const PASSWORD = 'balanced-line-26';

/**
 * What npm start prints at the end.
 * @param {string} address
 * @param {string} timing
 * @param {Record<string, unknown>} ready what the server said of itself
 */
export function welcome(address, timing, ready) {
  return [
    '',
    `Sidewash is at ${address}`,
    '',
    ...whatNext(address, ready),
    'Not an approved training device, not for operational use.',
    'The approved flight manual and licensed instruction govern.',
    '',
    `${timing} Ctrl-C stops everything.`,
  ].join('\n');
}

/**
 * @param {string} address
 * @param {Record<string, unknown>} ready
 */
function whatNext(address, { demonstration, setUpCode }) {
  if (typeof setUpCode === 'string') {
    return [
      `There is no organisation yet. Set it up at ${address}/set-up`,
      `From another machine it asks for this code: ${setUpCode}`,
      '',
    ];
  }
  if (demonstration !== true) return [];
  return [
    `Demonstration sign-ins (invented people; password ${PASSWORD}):`,
    ...SIGN_INS.map(([role, email]) => `  ${role.padEnd(14)}${email}`),
    '',
  ];
}
