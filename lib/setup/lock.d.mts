/** Takes a lock of this clone, or throws a sentence that says who has it. Answers how to give it back. */
export declare function holdLock(name: string, what: string): Promise<() => Promise<void>>
