import js from '@eslint/js';
import hooks from 'eslint-plugin-react-hooks';
import globals from 'globals';
import tseslint from 'typescript-eslint';

const tests = ['**/*.{spec,test}.{ts,tsx,mjs}', '**/{test,e2e,lighthouse,bench,testing}/**'];

/** File names in kebab-case, with further parts behind dots: job-list.repository.ts. */
const kebabCaseFile = {
  meta: { type: 'suggestion', schema: [], messages: { name: 'Name the file in kebab-case, not "{{ name }}".' } },
  create: (context) => ({
    Program(node) {
      const name = context.filename.split('/').at(-1);
      if (!/^\.?[a-z0-9]+(-[a-z0-9]+)*(\.[a-z0-9]+(-[a-z0-9]+)*)+$/.test(name)) context.report({ node, messageId: 'name', data: { name } });
    },
  }),
};

/** The name that an expression ends with: amountCents, row.amount_cents, row['amount_cents'], sumCents(), cents! */
function lastName(node) {
  switch (node?.type) {
    case 'Identifier':
      return node.name;
    case 'MemberExpression':
      return node.computed ? String(node.property.value ?? '') : node.property.name;
    case 'CallExpression':
      return lastName(node.callee);
    case 'ChainExpression':
    case 'TSNonNullExpression':
    case 'TSAsExpression':
      return lastName(node.expression);
    case 'UnaryExpression':
      return lastName(node.argument);
    default:
      return undefined;
  }
}

/** Amounts are computed in shared, which checks range and rounding; api and portal only pass them on. */
const noCentsArithmetic = {
  meta: { type: 'problem', schema: [], messages: { computed: 'Arithmetic on cents ("{{ name }}") belongs in shared.' } },
  create(context) {
    const isCents = (node) => /(^|_)cents$|Cents$/.test(lastName(node) ?? '');
    const check = (node, ...operands) => {
      const amount = operands.find(isCents);
      if (amount) context.report({ node, messageId: 'computed', data: { name: lastName(amount) } });
    };
    return {
      'BinaryExpression[operator=/^([-+*/%]|\\*\\*)$/]': (node) => check(node, node.left, node.right),
      'AssignmentExpression[operator=/^([-+*/%]|\\*\\*)=$/]': (node) => check(node, node.left, node.right),
      'UnaryExpression[operator="-"]': (node) => check(node, node.argument),
      UpdateExpression: (node) => check(node, node.argument),
      'CallExpression[callee.object.name="Math"]': (node) => check(node, ...node.arguments),
    };
  },
};

/** SQL stands in repositories, with bound values, where one can find and review it. */
const sqlInRepositories = {
  meta: { type: 'problem', schema: [], messages: { sql: 'SQL belongs in a *.repository.ts.' } },
  create(context) {
    const statement = /^\s*(select\s[^]*\bfrom\b|select\s+(app|graphile_worker)\.|insert\s+into\s|update\s+[\w.]+\s+set\s|delete\s+from\s|with\s+\w+\s+as\s*\()/i;
    const check = (node, text) => typeof text === 'string' && statement.test(text) && context.report({ node, messageId: 'sql' });
    return { Literal: (node) => check(node, node.value), TemplateLiteral: (node) => check(node, node.quasis.map((part) => part.value.cooked).join(' x ')) };
  },
};

const local = { rules: { 'kebab-case-file': kebabCaseFile, 'no-cents-arithmetic': noCentsArithmetic, 'sql-in-repositories': sqlInRepositories } };

/** Packages that have one door each, and the one file that may open it. */
const doors = { stripe: 'api/src/payments/stripe-client.ts', nodemailer: 'api/src/notices/mailer.ts', '@aws-sdk': 'api/src/files/s3-storage.ts' };
const closed = (open) => ({
  'no-restricted-imports': ['error', {
    patterns: Object.entries(doors).filter(([, file]) => file !== open).map(([name, file]) => ({ group: [name, `${name}/*`], message: `Only ${file} talks to ${name}.` })),
  }],
});

export default tseslint.config(
  { ignores: ['**/dist', '**/coverage', '.data'] },
  { linterOptions: { noInlineConfig: true, reportUnusedDisableDirectives: 'error' } },
  js.configs.recommended,
  {
    plugins: { tallypole: local },
    rules: {
      'tallypole/kebab-case-file': 'error',
      'max-lines': ['error', 400],
      'max-lines-per-function': ['error', 70],
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      'no-console': 'off',
    },
  },
  {
    files: ['**/*.{ts,tsx}'],
    extends: [...tseslint.configs.recommendedTypeChecked],
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: import.meta.dirname } },
    rules: {
      // ESLint does not see that a constant is used inside a parameter decorator
      'no-useless-assignment': 'off',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/switch-exhaustiveness-check': 'error',
      '@typescript-eslint/restrict-template-expressions': ['error', { allowNumber: true }],
    },
  },
  // the schema of text names the control characters that it refuses
  { files: ['shared/src/schemas/common.ts'], rules: { 'no-control-regex': 'off' } },
  { files: ['**/*.tsx'], rules: { 'max-lines-per-function': ['error', 120] } },
  { files: ['api/src/**/*.controller.ts'], rules: { 'max-lines': ['error', 100] } },
  {
    files: ['api/src/**/*.ts'],
    ignores: tests,
    rules: closed(),
  },
  ...Object.values(doors).map((file) => ({ files: [file], rules: closed(file) })),
  {
    files: ['{api,portal}/src/**/*.{ts,tsx}'],
    ignores: tests,
    rules: { 'tallypole/no-cents-arithmetic': 'error' },
  },
  {
    files: ['api/src/**/*.ts'],
    // common holds the unit of work and the limits, database the migrations, queue the statements of the queue's own schema
    ignores: [...tests, '**/*.repository.ts', 'api/src/{common,database,queue}/**'],
    rules: { 'tallypole/sql-in-repositories': 'error' },
  },
  { files: ['portal/**/*.{ts,tsx}'], ...hooks.configs.flat['recommended-latest'] },
  { files: ['portal/**/*.{ts,tsx}'], languageOptions: { globals: globals.browser } },
  { files: ['**/*.{js,mjs,cjs}'], languageOptions: { globals: globals.node } },
  {
    files: tests,
    languageOptions: { globals: globals.jest },
    rules: {
      'max-lines-per-function': 'off',
      '@typescript-eslint/no-non-null-assertion': 'off',
      '@typescript-eslint/no-unnecessary-type-assertion': 'off',
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      '@typescript-eslint/require-await': 'off',
      '@typescript-eslint/unbound-method': 'off',
    },
  },
);
