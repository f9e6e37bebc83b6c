import { Controller, Get, Inject } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { DemoPeople } from '@tallypole/shared/schemas/auth';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { Route } from '../common/route.ts';
import { demoPeople } from './demo-people.ts';

@ApiTags('demo')
@Controller('demo')
export class DemoController {
  constructor(@Inject(CONFIGURATION) private readonly configuration: Configuration) {}

  /** Who can be tried out; nothing at all unless demo data is on. It grants nothing: each signs in by a mailed code. */
  @Get('people') @Route('public', 'read') @ApiOkResponse({ standardSchema: DemoPeople })
  people(): DemoPeople {
    if (!this.configuration.DEMO) throw new Problem('not_found');
    return { people: demoPeople.map((person) => ({ ...person })), mailPageUrl: this.configuration.MAIL_PAGE_URL ?? null };
  }
}
