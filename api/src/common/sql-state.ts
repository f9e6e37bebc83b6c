import type { ProblemCode } from '@tallypole/shared/problems';

/** The SQLSTATE of an error that came through Sequelize or pg. */
export function sqlState(error: unknown): string | undefined {
  const { parent, code } = error as { parent?: { code?: unknown }; code?: unknown };
  const state = parent?.code ?? code;
  return typeof state === 'string' ? state : undefined;
}

/** What a database error means to a person. What isn't listed is a failure on our side. */
export const problemOfSqlState: Readonly<Record<string, ProblemCode>> = {
  '23503': 'refers_to_missing',
  '23505': 'already_exists',
  '23514': 'rule_broken',
  '40001': 'busy',
  '40P01': 'busy',
  '42501': 'not_found',
  '53300': 'busy',
  '55P03': 'busy',
  '57014': 'busy',
  '57P01': 'busy',
  '57P03': 'busy',
  ECONNREFUSED: 'busy',
  TP002: 'not_signed_in',
  TP030: 'wrong_state',
};

const LOST_STATES = new Set(['57P01', '57P02', '57P03', '08000', '08001', '08003', '08006', 'ECONNREFUSED', 'ECONNRESET', 'EPIPE', 'ETIMEDOUT']);
/** What pg says, without a code, of a connection that broke or fell silent. */
const LOST_WORDS = /connection terminated|not queryable|query read timeout|timeout expired|client was closed/i;

/** Whether an error says that the connection to the database is gone or silent: then nobody knows what became of the last statement. */
export function isConnectionLost(error: unknown): boolean {
  const { name, message, parent } = error as { name?: string; message?: string; parent?: { message?: string } };
  return LOST_STATES.has(sqlState(error) ?? '') || (name?.startsWith('SequelizeConnection') ?? false) || LOST_WORDS.test(parent?.message ?? message ?? '');
}
