import { spawn } from 'node:child_process';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { giveToAccount, postgresAccount } from '#scripts/cluster-folder.mjs';
import { requireProxyPrograms } from '#scripts/proxy-programs.mjs';
import { waitForPort } from './wait-for-port.ts';

export interface Passed {
  /** Addresses tried, in turn: more than one when the first did not listen. */
  upstreams: string[];
  status: number;
  request: string;
}

export interface Balancer {
  baseUrl: string;
  /** What it has passed on so far. */
  passed: () => Passed[];
  stop: () => Promise<void>;
}

/** nginx before the server processes, one request to each in turn, as Debian packs it and with its own defaults. */
export async function startBalancer(port: number, servers: readonly { baseUrl: string }[]): Promise<Balancer> {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'halfpail-balancer-'));
  const conf = path.join(folder, 'nginx.conf');
  const access = path.join(folder, 'access.log');
  fs.writeFileSync(conf, configuration(folder, port, servers));
  fs.writeFileSync(access, '');
  for (const file of [folder, conf, access]) giveToAccount(file);
  const words = ['-e', path.join(folder, 'error.log'), '-p', folder, '-c', conf];
  const nginx = spawn(requireProxyPrograms().nginx, words, { ...postgresAccount(), stdio: 'ignore' });
  const ended = new Promise((resolve) => nginx.once('exit', resolve));
  await waitForPort(port, nginx);
  return {
    baseUrl: `http://127.0.0.1:${port}`,
    passed: () => fs.readFileSync(access, 'utf8').trim().split('\n').filter(Boolean).map(readLine),
    stop: async () => {
      nginx.kill('SIGQUIT');
      await ended;
      fs.rmSync(folder, { recursive: true, force: true });
    },
  };
}

function readLine(line: string): Passed {
  const [upstreams = '', status, request = ''] = line.split('|');
  return { upstreams: upstreams.split(', '), status: Number(status), request };
}

function configuration(folder: string, port: number, servers: readonly { baseUrl: string }[]): string {
  const listed = servers.map(({ baseUrl }) => `server ${new URL(baseUrl).host} max_fails=1 fail_timeout=2s;`);
  const temporary = ['client_body', 'proxy', 'fastcgi', 'uwsgi', 'scgi'];
  return `daemon off;
worker_processes 1;
pid ${folder}/nginx.pid;
events { worker_connections 4096; }
http {
  log_format passed '$upstream_addr|$status|$request_method $uri';
  access_log ${folder}/access.log passed;
  ${temporary.map((name) => `${name}_temp_path ${folder}/${name};`).join('\n  ')}
  upstream shop { ${listed.join(' ')} keepalive 16; }
  server {
    listen 127.0.0.1:${port} backlog=4096;
    location / {
      proxy_pass http://shop;
      proxy_http_version 1.1;
      proxy_set_header Connection "";
      proxy_set_header Host $http_host;
      proxy_set_header X-Forwarded-For $remote_addr;
      proxy_set_header X-Forwarded-Proto http;
    }
  }
}
`;
}
