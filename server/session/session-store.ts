import { createHash } from 'node:crypto';
import connectPgSimple from 'connect-pg-simple';
import session, { type SessionData } from 'express-session';
import type pg from 'pg';

/** Without a request for this long a session ends. Long, because a van without signal may not be heard of for days. */
export const IDLE_LIMIT_MS = 7 * 24 * 3600 * 1000;
/** And in any case this long after sign-in (NIST SP 800-63B, 4.1.3: at most 30 days). */
export const ABSOLUTE_LIMIT_MS = 30 * 24 * 3600 * 1000;
/** How old the note of the last request may get before it is written again: not with every request. */
const SEEN_NOTE_AGE_MS = 5 * 60 * 1000;

/** What a session holds, as passport's serialised user. */
export interface SessionUser {
  personId: string;
  firmId: string;
  signedInAt: string;
  seenAt: string;
}

declare module 'express-session' {
  interface SessionData {
    passport?: { user?: SessionUser };
  }
}

const PgStore = connectPgSimple(session);
type Done = (error: unknown, value?: SessionData | null) => void;

/**
 * Sessions in PostgreSQL. The table knows only the hash of a session's id, so that reading the database opens no
 * session. A row is written once, at sign-in; later changes update it where it still stands, so that a request that was
 * under way cannot bring back a session that was ended meanwhile.
 */
export class SessionStore extends PgStore {
  readonly #pool: pg.Pool;
  readonly #now: () => Date;

  constructor(pool: pg.Pool, now: () => Date) {
    super({ pool, tableName: 'session', createTableIfMissing: false, disableTouch: true, pruneSessionInterval: false });
    this.#pool = pool;
    this.#now = now;
  }

  override get(sid: string, done: Done): void {
    const text = 'SELECT sess FROM session WHERE sid = $1 AND expire >= $2';
    this.#pool.query({ name: 'session', text, values: [keyOf(sid), utcText(this.#now())] }).then(
      ({ rows }) => done(null, (rows[0]?.sess as SessionData | undefined) ?? null),
      (error: unknown) => done(error),
    );
  }

  override set(sid: string, data: SessionData, done?: (error?: unknown) => void): void {
    const expire = new Date(this.#now().getTime() + IDLE_LIMIT_MS);
    this.#pool
      .query('INSERT INTO session (sid, sess, expire) VALUES ($1, $2, $3)', [keyOf(sid), data, utcText(expire)])
      .then(
        () => done?.(),
        (error: unknown) => done?.(error),
      );
  }

  override destroy(sid: string, done?: (error?: unknown) => void): void {
    super.destroy(keyOf(sid), done);
  }

  override touch(_sid: string, _data: SessionData, done?: () => void): void {
    done?.(); // noteSeen does it, not with every request
  }

  /** Moves the idle limit on, when the last note of it has grown old. */
  async noteSeen(sid: string, user: SessionUser): Promise<void> {
    const now = this.#now();
    if (now.getTime() - Date.parse(user.seenAt) < SEEN_NOTE_AGE_MS) return;
    const expire = new Date(now.getTime() + IDLE_LIMIT_MS);
    await this.#change(sid, 'seenAt', now.toISOString(), expire);
  }

  async chooseFirm(sid: string, firmId: string): Promise<void> {
    await this.#change(sid, 'firmId', firmId, new Date(this.#now().getTime() + IDLE_LIMIT_MS));
  }

  async #change(sid: string, field: keyof SessionUser, value: string, expire: Date): Promise<void> {
    await this.#pool.query(
      `UPDATE session SET expire = $4, sess = jsonb_set(sess::jsonb, ARRAY['passport', 'user', $2], to_jsonb($3::text))::json
        WHERE sid = $1`,
      [keyOf(sid), field, value, utcText(expire)],
    );
  }

  /** Ends every session of a person but, if given, one. */
  async endAllOf(personId: string, exceptSid?: string): Promise<void> {
    await this.#pool.query('DELETE FROM session WHERE person_id = $1 AND sid IS DISTINCT FROM $2', [
      personId,
      exceptSid === undefined ? null : keyOf(exceptSid),
    ]);
  }

  async removeExpired(): Promise<void> {
    await this.#pool.query('DELETE FROM session WHERE expire < $1', [utcText(this.#now())]);
  }
}

function keyOf(sid: string): string {
  return createHash('sha256').update(sid).digest('hex');
}

/** The column has no zone; it holds UTC whatever the connection's zone is. */
function utcText(at: Date): string {
  return at.toISOString().replace('Z', '');
}
