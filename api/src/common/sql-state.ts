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
