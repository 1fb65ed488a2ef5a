export declare function checkNode(): void
export declare function isWithin(version: string, range: string): boolean
export declare function ensurePackages(): Promise<void>
