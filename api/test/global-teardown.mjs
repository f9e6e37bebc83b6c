export default async function teardown() {
  await globalThis.__testPostgres?.stop();
}
