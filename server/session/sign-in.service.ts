import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { verifyPassword } from './password.ts';
import { findLastSignIn, findPasswordHash, findPersonId, firmIdsOf } from './session.repository.ts';
import { beginAttempt } from './throttle.ts';

const NOBODY = '00000000-0000-0000-0000-000000000000';

export interface Credentials {
  email: string;
  password: string;
}

/**
 * The person whom address and password belong to. An unknown address takes the same steps as a wrong password and
 * gets the same answer.
 * @throws Problem 401 `wrongCredentials`, 429 `tooManySignIns`
 */
export async function verifyCredentials(
  parts: Parts,
  { email, password }: Credentials,
  address: string,
): Promise<string> {
  const attempt = await beginAttempt(parts, email, address);
  const personId = await findPersonId(parts, email);
  const passwordHash = await findPasswordHash(parts, personId ?? NOBODY);
  const right = await verifyPassword(passwordHash, password);
  if (!right || personId === null) throw new Problem('wrongCredentials');
  await attempt.succeeded();
  return personId;
}

/**
 * The firm to start in: the one worked in last, else the first.
 * @throws Problem 403 `noActiveFirm` when the person has been taken out of every firm
 */
export async function firmToStartIn(parts: Parts, personId: string): Promise<string> {
  const firmIds = await firmIdsOf(parts, personId);
  const [first] = firmIds;
  if (first === undefined) throw new Problem('noActiveFirm');
  if (firmIds.length === 1) return first;
  let newest = { firmId: first, at: 0 };
  for (const firmId of firmIds) {
    const at = (await findLastSignIn(parts, personId, firmId))?.getTime() ?? 0;
    if (at > newest.at) newest = { firmId, at };
  }
  return newest.firmId;
}
