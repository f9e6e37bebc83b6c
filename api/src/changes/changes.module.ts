import { Module } from '@nestjs/common';
import { AuthModule } from '../auth/auth.module.ts';
import { PapersModule } from '../documents/documents.module.ts';
import { FilesModule } from '../files/files.module.ts';
import { ChangeActsController } from './change-acts.controller.ts';
import { ChangeActsService } from './change-acts.service.ts';
import { ChangeFactsRepository } from './change-facts.repository.ts';
import { ChangeMails } from './change-mails.ts';
import { ChangePapersRepository } from './change-papers.repository.ts';
import { ChangeReissue } from './change-reissue.ts';
import { ChangesController } from './changes.controller.ts';
import { ChangesRepository } from './changes.repository.ts';
import { ChangesService } from './changes.service.ts';
import { SigningRepository } from './signing.repository.ts';

const stored = [ChangesRepository, ChangeFactsRepository, ChangePapersRepository, ChangeMails];

/** What the worker needs to make the papers of changes. */
@Module({ imports: [PapersModule], providers: stored, exports: stored })
export class ChangePapersModule {}

/** For whatever moves what signing does: a signature, other terms of the loan. */
@Module({ providers: [SigningRepository, ChangeReissue], exports: [SigningRepository, ChangeReissue] })
export class ChangeReissueModule {}

@Module({
  imports: [AuthModule, FilesModule, ChangePapersModule, ChangeReissueModule],
  controllers: [ChangesController, ChangeActsController],
  providers: [ChangesService, ChangeActsService],
})
export class ChangesModule {}
