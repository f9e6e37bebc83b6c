import type { ApiBodyOptions } from '@nestjs/swagger';

/** A form with one file and text fields, for the OpenAPI document. */
export const uploadBody = (...fields: string[]): ApiBodyOptions => ({
  schema: {
    type: 'object',
    required: [...fields, 'file'],
    properties: { ...Object.fromEntries(fields.map((field) => [field, { type: 'string' }])), file: { type: 'string', format: 'binary' } },
  },
});
