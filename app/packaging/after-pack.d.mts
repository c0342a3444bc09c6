import type { FuseConfig } from '@electron/fuses';

export declare const fuses: FuseConfig & { readonly strictlyRequireAllFuses?: boolean | undefined };
export declare function executablePath(folder: string, platform: string, product: string, executable: string): string;
export default function afterPack(context: unknown): Promise<void>;
