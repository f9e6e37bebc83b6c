import { Controller, Get } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { Alive, Ready } from '@tallypole/shared/schemas/health';
import { Route } from '../common/route.ts';
import { ReadinessService } from './readiness.service.ts';

@ApiTags('health')
@Controller('health')
export class HealthController {
  constructor(private readonly readiness: ReadinessService) {}

  /** The process runs; nothing else is asked. A supervisor that restarts on a failure here never restarts for the database's sake. */
  @Get() @Route('public', 'read') @ApiOkResponse({ standardSchema: Alive })
  alive(): Alive {
    return { status: 'ok' };
  }

  /** Whether requests should come here now; 503 says in `detail` what is missing. */
  @Get('ready') @Route('public', 'read') @ApiOkResponse({ standardSchema: Ready })
  ready(): Promise<Ready> {
    return this.readiness.check();
  }
}
