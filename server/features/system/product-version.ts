import packageJson from '../../../package.json' with { type: 'json' };

export const PRODUCT_VERSION: string = packageJson.version;
