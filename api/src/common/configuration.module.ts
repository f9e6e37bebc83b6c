import { Global, Module } from '@nestjs/common';
import { Clock } from './clock.ts';
import { CONFIGURATION, readConfiguration } from './configuration.ts';

@Global()
@Module({
  providers: [{ provide: CONFIGURATION, useFactory: () => readConfiguration(process.env) }, Clock],
  exports: [CONFIGURATION, Clock],
})
export class ConfigurationModule {}
