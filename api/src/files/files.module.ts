import { Global, Module } from '@nestjs/common';
import { CONFIGURATION } from '../common/configuration.ts';
import { FILE_STORAGE } from './file-storage.ts';
import { FilesController } from './files.controller.ts';
import { FilesRepository } from './files.repository.ts';
import { FilesService } from './files.service.ts';
import { storageOf } from './storage-of.ts';
import { UploadReceiver } from './upload-receiver.ts';

const storage = { provide: FILE_STORAGE, inject: [CONFIGURATION], useFactory: storageOf };

/** Where bytes are kept, for web and worker alike. */
@Global()
@Module({ providers: [storage], exports: [FILE_STORAGE] })
export class StorageModule {}

@Module({ imports: [StorageModule], controllers: [FilesController], providers: [FilesService, FilesRepository, UploadReceiver], exports: [FilesRepository, UploadReceiver] })
export class FilesModule {}
