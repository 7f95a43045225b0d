import { z } from 'zod';

/** GET /tiles/index.json: every map that can be laid under a forecast, the product's own first. */
export const tileMapSchema = z.object({
  id: z.string(),
  name: z.string(),
  attribution: z.string(),
  description: z.string(),
  /** west, south, east, north in degrees. */
  bounds: z.tuple([z.number(), z.number(), z.number(), z.number()]),
  minzoom: z.number().int(),
  maxzoom: z.number().int(),
  /** Address with {z}, {x} and {y}. */
  url: z.string(),
  isOwn: z.boolean(),
});
export type TileMap = z.infer<typeof tileMapSchema>;

export const tileIndexSchema = z.object({
  maps: z.array(tileMapSchema),
  /** Files in the folder that cannot be shown, and why. */
  unusable: z.array(z.object({ file: z.string(), reason: z.string() })),
});
export type TileIndex = z.infer<typeof tileIndexSchema>;
