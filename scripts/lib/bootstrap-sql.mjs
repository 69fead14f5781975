// @ts-check
import { scramVerifier } from './secrets.mjs'

/**
 * The three roles of the house: `longpull_owner` owns the tables and migrates, `longpull_app` serves and owns nothing,
 * `longpull_backup` reads everything past the row rules. Run by a superuser on the database `postgres`, as often as one
 * likes; passwords are set anew each time.
 *
 * @param {Pick<import('./secrets.mjs').Secrets, 'owner' | 'app' | 'backup'>} passwords
 */
export function rolesSql(passwords) {
  const plain = 'login nosuperuser nocreatedb nocreaterole noreplication'
  return [
    roleSql('longpull_owner', `${plain} nobypassrls`, passwords.owner),
    roleSql('longpull_app', `${plain} nobypassrls`, passwords.app),
    roleSql('longpull_backup', `${plain} bypassrls`, passwords.backup),
  ].join('')
}

/**
 * @param {string} name
 * @param {string} attributes
 * @param {string} password
 */
function roleSql(name, attributes, password) {
  return `select 'create role ${name}' where not exists (select from pg_roles where rolname = '${name}') \\gexec
alter role ${name} ${attributes} password '${scramVerifier(password)}';
`
}

/**
 * A database of its own for the owner role, open to the three roles only. Run on the database `postgres` through psql;
 * ends connected to the new database. Safe to run again.
 *
 * @param {string} name
 */
export function databaseSql(name) {
  return `select 'create database ${name} owner longpull_owner' where not exists (select from pg_database where datname = '${name}') \\gexec
${databaseGrantsSql(name)}
\\connect ${name}
select 'create extension if not exists pg_trgm' where exists (select from pg_available_extensions where name = 'pg_trgm') \\gexec
`
}

/**
 * What a copy of a template does not inherit: the rights on the database itself.
 *
 * @param {string} name
 */
export function databaseGrantsSql(name) {
  return `revoke all on database ${name} from public;
grant connect, temporary on database ${name} to longpull_app;
grant connect on database ${name} to longpull_backup;`
}
