/**
 * Every error that the server answers: its HTTP status and its sentence for people. The code is the contract; the sentence may be
 * made more precise by the server where it knows more.
 */
export const problems = {
  invalid_input: { status: 400, title: 'Something in the form needs another look.' },
  malformed_request: { status: 400, title: 'The request could not be read.' },
  idempotency_key_missing: { status: 400, title: 'The request lacks its idempotency key.' },
  not_signed_in: { status: 401, title: 'Sign in to go on.' },
  visit_over: { status: 401, title: 'Your visit is over. Open the link in the mail again.' },
  link_over: { status: 410, title: 'This link is no longer good.' },
  wrong_code: { status: 400, title: 'That code is not right. Check the latest mail, or ask for a new code.' },
  code_expired: { status: 400, title: 'That code is no longer good. Ask for a new one.' },
  wrong_password: { status: 400, title: 'Address or password is not right. Try again, or have a code mailed.' },
  sign_in_over: { status: 400, title: 'This sign-in took too long or had too many tries. Begin again.' },
  second_step_needed: { status: 403, title: 'This needs a second step when you sign in. Set it up under “Your account”, then do this again.' },
  presence_needed: { status: 403, title: 'Confirm that it is you: enter a code.' },
  not_allowed: { status: 403, title: 'Your role on this job does not include this.' },
  cross_site: { status: 403, title: 'The request did not come from this site.' },
  not_found: { status: 404, title: 'There is nothing here, or it is not for you.' },
  already_exists: { status: 409, title: 'This exists already.' },
  key_reused: { status: 409, title: 'The same request was sent before with other content.' },
  stale: { status: 409, title: 'Somebody changed this in the meantime. Look at the latest version and try again.' },
  effect_changed: { status: 409, title: 'What this does has changed since you opened it. Look at it again before you decide.' },
  wrong_state: { status: 409, title: 'This is no longer possible.' },
  refers_to_missing: { status: 409, title: 'Something this refers to is gone.' },
  rule_broken: { status: 422, title: 'This breaks a rule of the job.' },
  review_missing: { status: 422, title: 'A structural change needs its review, with file, name and date, before it can be issued.' },
  unreadable_file: { status: 422, title: 'The file could not be read.' },
  file_too_large: { status: 413, title: 'The file is too large.' },
  wrong_file_kind: { status: 415, title: 'This kind of file is not accepted here.' },
  too_many_tries: { status: 429, title: 'Too many tries. Wait a little and try again.' },
  failed: { status: 500, title: 'Sorry, something went wrong on our side. Nothing was changed.' },
  busy: { status: 503, title: 'The system is busy. Try again in a moment; nothing was changed.' },
  unclear: { status: 503, title: 'We cannot tell whether this went through. Send it again: it will not be done twice.' },
  no_room: { status: 507, title: 'There is no room for files at the moment. Nothing was kept.' },
  payments_unavailable: { status: 503, title: 'Payments cannot be started just now. Nothing was charged.' },
} as const satisfies Record<string, { status: number; title: string }>;

export type ProblemCode = keyof typeof problems;

/** One field's error: a JSON pointer into the request's body, a code and a sentence. */
export interface FieldProblem {
  pointer: string;
  code: string;
  message: string;
}

/** The body of every error (RFC 9457, application/problem+json). */
export interface ProblemBody {
  type: string;
  title: string;
  status: number;
  code: ProblemCode;
  detail?: string;
  requestId?: string;
  errors?: FieldProblem[];
  /** The current version, where an edit met a newer one. */
  version?: number;
}
