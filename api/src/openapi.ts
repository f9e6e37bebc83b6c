import type { NestExpressApplication } from '@nestjs/platform-express';
import { DocumentBuilder, SwaggerModule, type OpenAPIObject } from '@nestjs/swagger';

/** The document of every route, made from the schemas that also parse the requests. */
export function openApiDocument(app: NestExpressApplication): OpenAPIObject {
  const builder = new DocumentBuilder().setTitle('Tallypole').setDescription('Changes and progress payments of residential building').setVersion('1');
  const document = SwaggerModule.createDocument(app, builder.build());
  // a query schema also appears as one nameless parameter; its fields are named by ApiQueryOf
  for (const path of Object.values(document.paths)) {
    for (const operation of Object.values(path) as { parameters?: { name?: string }[] }[]) {
      if (operation.parameters) operation.parameters = operation.parameters.filter(({ name }) => name);
    }
  }
  return document;
}
