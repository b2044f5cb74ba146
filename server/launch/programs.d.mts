export declare function startOf(pid: number): string | null
