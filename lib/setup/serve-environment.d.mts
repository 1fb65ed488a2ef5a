type Environment = Record<string, string | undefined>

export declare function serveTroubles(env: Environment): string[]
export declare function serveEnvironment(env: Environment): Environment
