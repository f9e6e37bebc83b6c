import { applyDecorators } from '@nestjs/common';
import { ApiQuery } from '@nestjs/swagger';
import { z } from 'zod';

/** @nestjs/swagger turns `@Query({ schema })` into one nameless parameter; this names each field of it. */
export const ApiQueryOf = (schema: z.ZodObject) =>
  applyDecorators(
    ...Object.entries(schema.shape).map(([name, field]) => {
      const { $schema: _, ...json } = z.toJSONSchema(field as z.ZodType, { target: 'openapi-3.0', io: 'input' }) as Record<string, unknown>;
      return ApiQuery({ name, required: !(field as z.ZodType).safeParse(undefined).success, schema: json });
    }),
  );
