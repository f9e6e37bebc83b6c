import { Module } from '@nestjs/common';
import { FilesModule } from '../files/files.module.ts';
import { PhotosController } from './photos.controller.ts';
import { PhotosRepository } from './photos.repository.ts';
import { PhotosService } from './photos.service.ts';

@Module({ imports: [FilesModule], controllers: [PhotosController], providers: [PhotosService, PhotosRepository] })
export class PhotosModule {}
