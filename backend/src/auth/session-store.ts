/** The plain shape of a database that sign-in needs: no person acts yet. */
export type Query = (sql: string, params: readonly unknown[]) => Promise<{ rows: Record<string, unknown>[] }>;

/** What the identity provider said of a person, and what the browser will hold. */
export interface NewSession {
  issuer: string;
  subject: string;
  email: string;
  emailVerified: boolean;
  name: string;
  tokenHash: Buffer;
  /** Of the invitation's link that began this sign-in; null for a plain one. */
  invitationHash: Buffer | null;
  idleHours: number;
  maxDays: number;
  /** The browser's own description, for the list of sessions. */
  agent: string;
}

export interface SessionPerson {
  personId: string;
  name: string;
  email: string;
  sessionId: string;
  expiresAt: Date;
}

export interface SessionStore {
  /** False when the person may not come in: the reason is nobody's business, invited or not. */
  begin(session: NewSession): Promise<boolean>;
  /** The person of a living session, whose idle time begins anew; null when it has ended. */
  find(tokenHash: Buffer): Promise<SessionPerson | null>;
  end(tokenHash: Buffer): Promise<void>;
}

/** Sessions in PostgreSQL, reached only through the functions of the schema auth. */
export function sqlSessionStore(query: Query): SessionStore {
  return {
    async begin(session) {
      const { rows } = await query(
        `select outcome from auth.begin_session($1, $2, $3, $4, $5, $6, $7, $8::double precision * interval '1 hour', $9::double precision * interval '1 day', $10)`,
        [session.issuer, session.subject, session.email, session.emailVerified, session.name,
          session.tokenHash, session.invitationHash, session.idleHours, session.maxDays, session.agent]);
      return rows[0]?.['outcome'] === 'ok';
    },
    async find(tokenHash) {
      const { rows } = await query('select person_id, display_name, email, expires_at, session_id from auth.session_person($1)', [tokenHash]);
      const row = rows[0];
      if (!row) return null;
      return {
        personId: row['person_id'] as string,
        name: row['display_name'] as string,
        email: row['email'] as string,
        sessionId: row['session_id'] as string,
        expiresAt: row['expires_at'] as Date,
      };
    },
    async end(tokenHash) {
      await query('select auth.end_session($1)', [tokenHash]);
    },
  };
}
