import type { EntityManager } from 'typeorm';
import type { Locale } from '../../shared/session/session.schema.ts';

export interface DueMail {
  /** The record that holds the seal. */
  sequence: number;
  personId: string;
  name: string;
  email: string;
  locale: Locale;
  firmName: string;
}

/**
 * For every owner of the firm at this moment. A number that was mailed before is mailed again: then somebody cut the log
 * off and sealed another one, and who holds the earlier mail sees it.
 */
export async function addSealMails(manager: EntityManager, firmId: string, sequence: number, at: Date): Promise<void> {
  await manager.query(
    `insert into seal_mail (firm_id, sequence, person_id, due_since)
       select m.firm_id, $2, m.person_id, $3 from membership m
       where m.firm_id = $1 and m.active and 'owner' = any (m.roles)
       on conflict (firm_id, sequence, person_id)
         do update set due_since = excluded.due_since, sent_at = null, claimed_until = null`,
    [firmId, sequence, at],
  );
}

/** How long one server has for a mail before another may try: longer than the mail server's own limits. */
const CLAIM_MINUTES = 10;
/** A head that could not be mailed for so long is followed by newer ones, which say more. */
const GIVE_UP_DAYS = 7;

/** Takes the mails that nobody else is sending, to who is still an owner. Sent outside of any transaction; `markSealMailSent` says that it was. */
export async function claimSealMails(manager: EntityManager, now: Date): Promise<DueMail[]> {
  const rows = await manager.query<[(Omit<DueMail, 'sequence'> & { sequence: string })[], number]>(
    `with claimed as (
       update seal_mail set claimed_until = $1::timestamptz + interval '${CLAIM_MINUTES} minutes'
         where (firm_id, sequence, person_id) in (
           select firm_id, sequence, person_id from seal_mail
             where sent_at is null and due_since > $1::timestamptz - interval '${GIVE_UP_DAYS} days'
               and (claimed_until is null or claimed_until < $1)
               and exists (select from membership m where m.firm_id = seal_mail.firm_id
                 and m.person_id = seal_mail.person_id and m.active and 'owner' = any (m.roles))
             for update of seal_mail skip locked)
         returning firm_id, sequence, person_id)
     select c.sequence, c.person_id as "personId", p.name, p.email,
         coalesce(p.preferences ->> 'locale', f.locale) as locale, f.name as "firmName"
       from claimed c join person p on p.id = c.person_id join firm f on f.id = c.firm_id order by c.sequence`,
    [now],
  );
  return (rows as unknown as (Omit<DueMail, 'sequence'> & { sequence: string })[]).map((row) => ({
    ...row,
    sequence: Number(row.sequence),
  }));
}

export async function markSealMailSent(manager: EntityManager, mail: DueMail, at: Date): Promise<void> {
  await manager.query('update seal_mail set sent_at = $3 where sequence = $1 and person_id = $2', [
    mail.sequence,
    mail.personId,
    at,
  ]);
}

/** Tried, and refused by the mail server: free for the next round. */
export async function releaseSealMail(manager: EntityManager, mail: DueMail): Promise<void> {
  await manager.query('update seal_mail set claimed_until = null where sequence = $1 and person_id = $2', [
    mail.sequence,
    mail.personId,
  ]);
}
