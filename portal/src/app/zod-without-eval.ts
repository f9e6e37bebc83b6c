import { config } from 'zod/v4/core';

// the content policy forbids eval; zod would try it and be reported. This must run before any schema is built.
config({ jitless: true });
