import fs from 'node:fs';
import path from 'node:path';
import { installDebianPackages } from './apt.mjs';

const debianFolder = '/usr/lib/postgresql';
const needed = ['initdb', 'postgres', 'pg_ctl'];

/** @returns {string} the folder with initdb, postgres and pg_ctl, installed first when it is missing */
export function requirePostgresPrograms() {
  const found = findPostgresPrograms();
  if (found) return found;
  keepDebianFromStartingACluster();
  installDebianPackages(['postgresql-15'], 'the private database');
  const installed = findPostgresPrograms();
  if (installed) return installed;
  throw new Error('postgresql-15 is installed but its programs were not found');
}

/** PG_BIN_DIRS (folders separated by colons) replaces the places looked at. */
function findPostgresPrograms() {
  const folders = process.env['PG_BIN_DIRS']?.split(':') ?? [
    ...debianVersions(),
    ...(process.env['PATH'] ?? '').split(':'),
  ];
  return folders.find((folder) => folder !== '' && needed.every((name) => fs.existsSync(path.join(folder, name))));
}

function debianVersions() {
  if (!fs.existsSync(debianFolder)) return [];
  const versions = fs.readdirSync(debianFolder).sort((a, b) => Number(b) - Number(a));
  return versions.map((version) => path.join(debianFolder, version, 'bin'));
}

function keepDebianFromStartingACluster() {
  if (process.getuid?.() !== 0 || !fs.existsSync('/usr/bin/apt-get')) return;
  fs.mkdirSync('/etc/postgresql-common/createcluster.d', { recursive: true });
  fs.writeFileSync('/etc/postgresql-common/createcluster.d/no-main.conf', 'create_main_cluster = false\n');
}
