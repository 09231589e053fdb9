import { rm, mkdir } from 'node:fs/promises';
import path from 'node:path';
import { startMail } from './mail.mjs';
import { startMariadb } from './mariadb.mjs';
import { rememberedPorts } from './ports.mjs';
import { run } from './processes.mjs';
import { localSecrets } from './secrets.mjs';
import { startStore } from './store.mjs';

const STORE_NAMES = ['S3_ENDPOINT', 'S3_REGION', 'S3_BUCKET', 'S3_ACCESS_KEY_ID', 'S3_SECRET_ACCESS_KEY'];

/**
 * Database, store and mail: real ones where the environment names them, local ones where it does not. Answers the
 * environment the product runs in, and how to stop what was started, in the reverse order.
 */
export async function startServices({ data, databases = ['midfringe'], outside = process.env }) {
  const secrets = await localSecrets(data);
  const ports = await rememberedPorts(data, ['database', 'store', 'mail']);
  const stops = [];
  const stop = async () => {
    for (const one of stops.splice(0).reverse()) await one();
  };
  try {
    const env = {
      NEXTAUTH_SECRET: outside.NEXTAUTH_SECRET ?? secrets.session,
      SPOOL_FOLDER: outside.SPOOL_FOLDER ?? path.join(data, 'spool'),
      // The store's client warns of a Node version it will want next year; nothing to do about it here.
      AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true',
      LOG_FILE: outside.LOG_FILE ?? path.join(data, 'logs', 'midfringe.log'),
    };
    await mkdir(env.SPOOL_FOLDER, { recursive: true, mode: 0o700 });
    let urls = null;
    let database = null;
    if (outside.DATABASE_URL) {
      env.DATABASE_URL = outside.DATABASE_URL;
      env.DATABASE_OWNER_URL = outside.DATABASE_OWNER_URL ?? outside.DATABASE_URL;
    } else {
      database = await startMariadb({ data, port: ports.database, secrets, databases });
      stops.push(database.stop);
      urls = database.urls;
      env.DATABASE_URL = urls[databases[0]].app;
      env.DATABASE_OWNER_URL = urls[databases[0]].owner;
      env.DATABASE_APP_HOST = '127.0.0.1';
    }
    if (outside.S3_BUCKET) {
      for (const name of STORE_NAMES) if (outside[name]) env[name] = outside[name];
    } else {
      const store = await startStore({ data, port: ports.store });
      stops.push(store.stop);
      Object.assign(env, store.env);
    }
    if (outside.SMTP_URL) {
      env.SMTP_URL = outside.SMTP_URL;
      if (outside.MAIL_FROM) env.MAIL_FROM = outside.MAIL_FROM;
    } else {
      const mail = await startMail({ data, port: ports.mail });
      stops.push(mail.stop);
      Object.assign(env, mail.env);
    }
    return { env, urls, database, stop };
  } catch (problem) {
    await stop();
    throw problem;
  }
}

/** Brings a database to the newest schema. */
export async function migrateDatabase(root, env) {
  return run(process.execPath, ['--import', 'tsx', 'scripts/migrate.ts'], {
    cwd: root,
    env: { ...process.env, ...env },
    quiet: true,
    failure: 'The database could not be brought to the newest schema.',
  });
}

/** Empties a data folder of everything the product put in it. */
export async function emptyData(data) {
  for (const name of ['mariadb', 's3', 'mails', 'spool'])
    await rm(path.join(data, name), { recursive: true, force: true });
}
