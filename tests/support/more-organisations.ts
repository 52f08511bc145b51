import { randomUUID } from 'node:crypto';
import type { Role } from '#shared/contracts/session.ts';
import type { TestServer } from './test-server.ts';

/** A second organisation with one person in it; its mailbox is "<mailbox>@elsewhere.example". */
export async function addOrganisation(server: TestServer, mailbox: string, roles: Role[]): Promise<string> {
  const organisationId = randomUUID();
  const at = new Date();
  const [row] = await server.sql('SELECT password_hash AS hash FROM person LIMIT 1');
  await server.database.transaction(async (on) => {
    await on.organisations.insert({
      id: organisationId,
      slug: `elsewhere-${organisationId.slice(0, 8)}`,
      name: 'Elsewhere Flight School (invented)',
      settings: { units: 'aviation', recognitionTimeS: null, guests: false, caution: '' },
      demonstration: false,
      at,
    });
    await on.people.insert({
      id: randomUUID(),
      organisationId,
      email: `${mailbox}@elsewhere.example`,
      displayName: 'E. Elsewhere',
      fullName: 'Eve Elsewhere',
      passwordHash: String(row['hash']),
      status: 'active',
      roles,
      at,
    });
  });
  return organisationId;
}
