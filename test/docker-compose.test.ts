import { readFileSync } from 'node:fs';
import { Ajv } from 'ajv';
import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';

/** No container engine runs where this project is tested, so the structure of docker-compose.yml is checked against
 *  the Compose Specification (https://github.com/compose-spec/compose-spec): its own JSON Schema
 *  (test/golden/compose-spec, unchanged) and, by hand, the rules of its text that a schema cannot say. */

interface Service {
  image?: string;
  build?: { context: string; dockerfile_inline: string };
  command?: string[];
  environment?: Record<string, string>;
  ports?: string[];
  volumes?: string[];
  depends_on?: Record<string, { condition: string }>;
  healthcheck?: { test: string[] };
  container_name?: string;
  deploy?: { replicas: number };
}
interface Compose {
  services: Record<string, Service>;
  volumes: Record<string, unknown>;
}

const read = (path: string) => readFileSync(new URL(path, import.meta.url), 'utf8');
const compose = parse(read('../docker-compose.yml')) as Compose;
const { redis, coordinator, worker } = compose.services;
const schema = JSON.parse(read('golden/compose-spec/schema.json')) as object;

function validator() {
  const ajv = new Ajv({ strict: false, allErrors: true, validateFormats: false });
  return ajv.compile({ ...schema, $schema: 'http://json-schema.org/draft-07/schema#' });
}

describe('docker-compose.yml', () => {
  it('is valid by the JSON Schema of the Compose Specification', () => {
    const validate = validator();
    validate(compose);
    expect(validate.errors ?? []).toEqual([]);
  });

  it('would be refused by that schema with a misspelt key (the check can fail)', () => {
    const validate = validator();
    expect(validate({ services: { redis: { image: 'redis:7', helthcheck: {} } } })).toBe(false);
  });

  it('declares every volume a service mounts by name (spec.md, "volumes")', () => {
    for (const service of Object.values(compose.services))
      for (const mount of service.volumes ?? []) expect(compose.volumes).toHaveProperty(mount.split(':')[0]);
  });

  it('waits only for services that exist, and for a healthy one only where it has a health check (05-services.md, "depends_on")', () => {
    for (const service of Object.values(compose.services))
      for (const [name, { condition }] of Object.entries(service.depends_on ?? {})) {
        expect(compose.services).toHaveProperty(name);
        if (condition === 'service_healthy') expect(compose.services[name].healthcheck).toBeDefined();
      }
  });

  it('gives Redis an append-only file, no eviction, a kept volume and a health check', () => {
    const command = redis.command?.join(' ') ?? '';
    expect(command).toContain('--appendonly yes');
    expect(command).toContain('--maxmemory-policy noeviction');
    expect(redis.volumes).toEqual([expect.stringMatching(/:\/data$/)]);
    expect(redis.healthcheck?.test).toEqual(['CMD', 'redis-cli', 'ping']);
  });

  it('publishes nothing beyond the host: no port of Redis, the dashboard on the loopback address (05-services.md, "ports")', () => {
    expect(redis.ports).toBeUndefined();
    expect(worker.ports).toBeUndefined();
    for (const port of coordinator.ports ?? []) expect(port).toMatch(/^127\.0\.0\.1:\d+:\d+$/);
  });

  it('leaves workers scalable: no container name, no host port (05-services.md, "container_name")', () => {
    expect(worker.container_name).toBeUndefined();
    expect(worker.deploy?.replicas).toBeGreaterThan(1);
  });

  it('keeps the store in a named volume of the coordinator alone, writable by its user', () => {
    const [name, path] = coordinator.volumes?.[0].split(':') ?? [];
    expect(compose.volumes).toHaveProperty(name);
    expect(coordinator.command).toContain(`--store=${path}/trigpoint.sqlite`);
    expect(coordinator.build?.dockerfile_inline).toContain(`chown node:node ${path}`);
    expect(worker.volumes).toBeUndefined();
  });

  it('builds coordinator and worker from one inline Dockerfile: their fingerprints agree (build.md, "dockerfile_inline")', () => {
    expect(worker.build).toEqual(coordinator.build);
    expect(worker.image).toBe(coordinator.image);
    expect(worker.environment).toEqual(coordinator.environment);
  });

  it('copies only paths that exist and are not ignored', () => {
    const ignored = read('../.dockerignore').split('\n').filter(Boolean);
    const copies = [
      ...(coordinator.build?.dockerfile_inline ?? '').matchAll(/^\s*COPY (?!--from)(.+) \S+$/gm),
    ];
    const sources = copies.flatMap(([, paths]) => paths.split(' '));
    expect(sources).toContain('package-lock.json');
    for (const source of sources) {
      expect(ignored).not.toContain(source);
      expect(() => readFileSync(new URL(`../${source}`, import.meta.url))).not.toThrow(/ENOENT/);
    }
  });
});
