import { UsageError } from '../errors.js';
import { quoted } from './shell-word.js';

/** A value of a manifest. */
type Node = string | number | boolean | readonly Node[] | { readonly [key: string]: Node };

/** A value as YAML in block style; texts are quoted as in JSON, which YAML takes as they are. */
export function yamlOf(node: Node, indent = ''): string {
  const within = (value: Node): string =>
    typeof value !== 'object' || Object.keys(value).length === 0
      ? ` ${JSON.stringify(value)}\n`
      : `\n${yamlOf(value, `${indent}  `)}`;
  if (Array.isArray(node))
    return node.map((one: Node) => `${indent}- ${yamlOf(one, `${indent}  `).slice(indent.length + 2)}`).join('');
  if (typeof node !== 'object') return `${indent}${JSON.stringify(node)}\n`;
  return Object.entries(node)
    .map(([key, value]) => `${indent}${key}:${within(value)}`)
    .join('');
}

/** The folder that holds all of some absolute paths: where they are one volume for the pods. */
export function commonFolder(paths: readonly string[]): string {
  const parts = paths.map((path) => path.split('/').slice(0, -1));
  const first = parts[0] ?? [];
  const differs = first.findIndex((part, i) => parts.some((other) => other[i] !== part));
  return first.slice(0, differs < 0 ? first.length : differs).join('/') || '/';
}

/**
 * The jobs of a run for Kubernetes: an Indexed Job with one index a shard, and the reduction, which stands suspended until
 * it is let go. An index whose input or model is wrong is not tried again; a pod that its node lost does not count.
 * @throws UsageError `events.mount` where the volume does not hold the run or its input
 */
export function kubernetesManifest(options: {
  /** absolute path of the run */
  readonly run: string;
  /** absolute paths of what the run reads */
  readonly inputs: readonly string[];
  readonly shards: number;
  readonly planHash: string;
  readonly image: string;
  /** name of a claim of a volume that every pod may write to */
  readonly claim: string;
  /** where the volume stands in the pods; the folder that holds run and input otherwise */
  readonly mount?: string;
  readonly command: string;
  readonly tries: number;
  /** exit codes of a shard after which no try helps */
  readonly finalCodes: readonly number[];
}): string {
  const { run, shards, command } = options;
  const paths = [run, ...options.inputs];
  const mount = options.mount?.replace(/(?<=.)\/+$/, '') ?? commonFolder(paths);
  const outside = paths.find((path) => !path.startsWith(`${mount}/`));
  if (outside !== undefined || mount === '/')
    throw new UsageError(
      'events.mount',
      mount === '/'
        ? `${paths.join(' and ')} have no folder in common that could be a volume; lay them under one folder and plan again`
        : `--mount ${mount}: ${outside} does not lie in it; name a folder that holds the run and its input`,
    );
  const name = `galewake-${options.planHash.slice(0, 8)}`;
  const pod = (words: string): Node => ({
    metadata: { labels: { app: 'galewake', run: name } },
    spec: {
      restartPolicy: 'Never',
      containers: [
        {
          name: 'galewake',
          image: options.image,
          // $(NAME) would be a variable of the pod
          command: ['/bin/sh', '-c', `exec ${command} ${words}`.replaceAll('$(', '$$$$(')],
          resources: { requests: { cpu: '1', memory: '1Gi' }, limits: { memory: '2Gi' } },
          volumeMounts: [{ name: 'run', mountPath: mount }],
        },
      ],
      volumes: [{ name: 'run', persistentVolumeClaim: { claimName: options.claim } }],
    },
  });
  const job = (part: string, spec: { readonly [key: string]: Node }): Node => ({
    apiVersion: 'batch/v1',
    kind: 'Job',
    metadata: { name: `${name}-${part}`, labels: { app: 'galewake', run: name } },
    spec,
  });
  const array = job('shards', {
    completionMode: 'Indexed',
    completions: shards,
    parallelism: Math.min(shards, 50),
    backoffLimitPerIndex: options.tries,
    podFailurePolicy: {
      rules: [
        { action: 'Ignore', onPodConditions: [{ type: 'DisruptionTarget', status: 'True' }] },
        { action: 'FailIndex', onExitCodes: { operator: 'In', values: options.finalCodes } },
      ],
    },
    template: pod(`events shard ${quoted(run)} --quiet`),
  });
  const reduce = job('reduce', { suspend: true, backoffLimit: 0, template: pod(`events reduce ${quoted(run)}`) });
  return `# An Indexed Job with one index a shard, and the reduction, which stands suspended. Kubernetes 1.29 or newer.
# Image ${JSON.stringify(options.image)} and claim ${JSON.stringify(options.claim)} are to be yours: an image with galewake in it, and a volume
# that all pods may write to (ReadWriteMany).
#   kubectl apply -f FILE
#   kubectl wait --for=condition=complete --timeout=24h job/${name}-shards
#   kubectl patch job/${name}-reduce -p '{"spec":{"suspend":false}}'
# Where indices failed, the first job ends as failed: galewake events missing RUN names them; delete both jobs and apply the
# file again, shards that are done end at once.
---
${yamlOf(array)}---
${yamlOf(reduce)}`;
}
