import { Body, Controller, Get, HttpCode, Param, Post, Req, Res } from '@nestjs/common';
import { ApiBody, ApiConsumes, ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/firms';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { uploadBody } from '../files/upload-body.ts';
import { ErasureService } from './erasure.service.ts';
import { FirmSettingsService } from './firm-settings.service.ts';
import { LogoService } from './logo.service.ts';

const Firm = () => Param('firmId', { schema: Id });

@ApiTags('firms')
@Controller('firms/:firmId')
export class FirmSettingsController {
  constructor(
    private readonly settings: FirmSettingsService,
    private readonly logos: LogoService,
    private readonly erasure: ErasureService,
  ) {}

  @Get('settings') @Route('firm.settings', 'read') @ApiOkResponse({ standardSchema: S.FirmSettings })
  get(@CurrentActor() actor: Actor, @Firm() firmId: string): Promise<S.FirmSettings> {
    return this.settings.settings(actor, firmId);
  }

  @Post('settings') @HttpCode(200) @Route('firm.settings', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.FirmSettings })
  async set(
    @CurrentActor() actor: Actor, @Firm() firmId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.FirmSettingsInput }) body: S.FirmSettingsInput, @Res({ passthrough: true }) response: Response,
  ): Promise<S.FirmSettings> {
    return answer(response, await this.settings.set(actor, firmId, body, key));
  }

  @Get('logo') @Route('firm.settings', 'read') @ApiOkResponse({ description: 'The logo as it stands on papers, a PNG.' })
  async logo(@CurrentActor() actor: Actor, @Firm() firmId: string, @Res() response: Response): Promise<void> {
    const picture = await this.logos.picture(actor, firmId);
    response.setHeader('Content-Type', 'image/png');
    response.setHeader('Content-Disposition', 'inline');
    response.setHeader('Content-Security-Policy', "sandbox; default-src 'none'");
    response.end(picture);
  }

  @Post('logo') @Route('firm.settings', 'upload') @ApiConsumes('multipart/form-data') @ApiBody(uploadBody()) @ApiCreatedResponse({ standardSchema: S.FirmSettings })
  setLogo(@CurrentActor() actor: Actor, @Firm() firmId: string, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<S.FirmSettings> {
    return this.logos.set(actor, firmId, request, response);
  }

  @Post('logo/remove') @Route('firm.settings', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.FirmSettings })
  async removeLogo(@CurrentActor() actor: Actor, @Firm() firmId: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.FirmSettings> {
    return answer(response, await this.logos.remove(actor, firmId, key));
  }

  @Get('people-who-left') @Route('firm.members', 'read') @ApiOkResponse({ standardSchema: S.PeopleWhoLeft })
  whoLeft(@CurrentActor() actor: Actor, @Firm() firmId: string): Promise<S.PeopleWhoLeft> {
    return this.erasure.whoLeft(actor, firmId);
  }

  @Post('people-who-left/:personId/erase') @Route('firm.members', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.PeopleWhoLeft })
  async erase(
    @CurrentActor() actor: Actor, @Firm() firmId: string, @Param('personId', { schema: Id }) personId: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response,
  ): Promise<S.PeopleWhoLeft> {
    return answer(response, await this.erasure.erase(actor, firmId, personId, key));
  }
}
