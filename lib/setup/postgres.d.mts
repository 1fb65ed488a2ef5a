export type ClusterName = 'main' | 'test' | 'bench' | 'faults'

export type Cluster = {
  name: ClusterName
  folder: string
  /** Whom it runs as; empty for this very user. */
  user: { uid?: number; gid?: number }
  bin: string
  port: number
  passwords: { superuser: string; owner: string; app: string }
}

export declare const OWNER_ROLE: 'emberstave_owner'
export declare const APP_ROLE: 'emberstave_app'

export declare function startCluster(
  name: ClusterName,
  options?: { fast?: boolean },
): Promise<Cluster & { started: boolean }>
export declare function stopCluster(cluster: Cluster): Promise<boolean>
export declare function databaseUrl(
  cluster: Cluster,
  role: 'superuser' | 'owner' | 'app',
  database: string,
): string
