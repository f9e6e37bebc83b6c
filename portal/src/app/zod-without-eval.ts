import { z } from 'zod';

// the content policy forbids eval; zod would try it and be reported. This must run before any schema is built.
z.config({ jitless: true });
