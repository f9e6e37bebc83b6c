-- The roles that Tallypole's database knows, and one database. Run by a superuser through psql, as often as you like:
--   psql -v owner_password=… -v read_password=… -v write_password=… -v worker_password=… -v queue_password=… \
--        -v database=tally -f roles.sql
-- Roles belong to the whole cluster, so they can't stand in a migration. Settings and grants of a single database are not
-- copied by "create database … template", hence settings stand on the role and the grants below are repeated per database.
\set ON_ERROR_STOP on
\if :{?owner_password}
  select format('create role %I login', name) from (values
    ('tally_owner'), ('app_read'), ('app_write'), ('app_worker'), ('queue_owner')) as wanted (name)
  where not exists (select from pg_roles where rolname = name)
  \gexec

  -- Owns tables and SECURITY DEFINER functions, migrates and dumps. Without BYPASSRLS the forced policies would blind it.
  alter role tally_owner  nosuperuser nocreatedb nocreaterole noreplication bypassrls   password :'owner_password';
  -- What runs: owns nothing, bypasses nothing.
  alter role app_read     nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'read_password';
  alter role app_write    nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'write_password';
  alter role app_worker   nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'worker_password';
  -- Owns the schema of the queue alone.
  alter role queue_owner  nosuperuser nocreatedb nocreaterole noreplication nobypassrls password :'queue_password';

  select format('alter role %I set %s', name, setting)
  from (values ('app_read'), ('app_write'), ('app_worker')) as runtime (name),
       (values ('statement_timeout = ''10s'''), ('lock_timeout = ''3s'''),
               ('idle_in_transaction_session_timeout = ''15s'''),
               -- statements are short: compiling one would take longer than running it
               ('jit = off')) as limits (setting)
  \gexec
  -- One page's figures agree, and no reading request can write.
  alter role app_read set default_transaction_read_only = on;
  alter role app_read set default_transaction_isolation = 'repeatable read';
\endif

\if :{?database}
  \if :{?template}
  \else
    \set template template0
  \endif
  select format('create database %I owner tally_owner template %I', :'database', :'template')
  where not exists (select from pg_database where datname = :'database')
  \gexec
  revoke all on database :"database" from public;
  grant connect on database :"database" to app_read, app_write, app_worker, queue_owner;
  -- The queue's own migrations make its schema.
  grant create on database :"database" to queue_owner;
\endif
