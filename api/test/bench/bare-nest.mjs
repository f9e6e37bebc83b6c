// What Nest on Express and pg can do at best: one indexed query, then the bytes that the product would send.
import 'reflect-metadata';
import { Controller, Get, Module, Res } from '@nestjs/common';
import { NestFactory } from '@nestjs/core';
import pg from 'pg';

const { DATABASE_URL, PORT, JOB_ID, DATABASE_POOL } = process.env;
const bytes = await new Promise((done) => process.once('message', done));
const pool = new pg.Pool({ connectionString: DATABASE_URL, max: Number(DATABASE_POOL) });

class BareController {
  async read(response) {
    await pool.query('select id, name from job where id = $1', [JOB_ID]);
    response.type('application/json').send(bytes);
  }
}
Get()(BareController.prototype, 'read', Object.getOwnPropertyDescriptor(BareController.prototype, 'read'));
Res()(BareController.prototype, 'read', 0);
Controller('bare')(BareController);

class BareModule {}
Module({ controllers: [BareController] })(BareModule);

const app = await NestFactory.create(BareModule, { logger: false });
await app.listen(Number(PORT), '127.0.0.1');
process.send('ready');
process.once('disconnect', () => process.exit(0));
