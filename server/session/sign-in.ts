import type { Request, Response } from 'express';
import passportModule from 'passport';
import { Strategy as LocalStrategy } from 'passport-local';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { noteSignIn } from './session.repository.ts';
import type { SessionUser } from './session-store.ts';
import { firmToStartIn, verifyCredentials } from './sign-in.service.ts';

declare global {
  namespace Express {
    interface User {
      personId: string;
    }
  }
}

export interface SignIn {
  /** Judges `req.body` (email, password) and starts a session. @throws Problem 401, 403, 429 */
  withPassword(req: Request, res: Response): Promise<SessionUser>;
  /** Starts a session for somebody who has proved otherwise who they are. */
  as(req: Request, personId: string, firmId: string): Promise<SessionUser>;
}

/** Passport's local strategy over our own accounts. One for each app: nothing is kept in module state. */
export function signInWith(parts: Parts): SignIn {
  const passport = new passportModule.Passport();
  passport.use(
    new LocalStrategy({ usernameField: 'email', passReqToCallback: true }, (req, email, password, done) => {
      verifyCredentials(parts, { email, password }, req.ip ?? '').then((personId) => done(null, { personId }), done);
    }),
  );

  const judge = (req: Request, res: Response): Promise<string> =>
    new Promise((resolve, reject) => {
      const answer = (error: unknown, user: Express.User | false | null | undefined) => {
        if (error) reject(error);
        else if (user) resolve(user.personId);
        else reject(new Problem('wrongCredentials'));
      };
      passport.authenticate('local', { session: false }, answer)(req, res, reject);
    });

  const start = async (req: Request, personId: string, firmId: string): Promise<SessionUser> => {
    const at = parts.now().toISOString();
    const user: SessionUser = { personId, firmId, signedInAt: at, seenAt: at };
    await new Promise<void>((resolve, reject) => {
      // The id changes, so that one planted before sign-in is worth nothing, and what the session held is dropped.
      req.session.regenerate((error: unknown) => {
        if (error) return reject(error);
        req.session.passport = { user };
        req.session.save((failed: unknown) => (failed ? reject(failed) : resolve()));
      });
    });
    await noteSignIn(parts, personId, firmId);
    return user;
  };

  return {
    async withPassword(req, res) {
      const personId = await judge(req, res);
      const firmId = await firmToStartIn(parts, personId);
      return start(req, personId, firmId);
    },
    as: start,
  };
}
