'use client';

import { createContext, type ComponentType } from 'react';
import type { BlockAttributes } from '../../db/inputs/block-settings';

/** What the editor hands to whatever draws a diffusion block. */
export interface BlockViewProps {
  readonly attributes: BlockAttributes;
  /** Attributes whose content in the document cannot be used; `attributes` has their defaults instead. */
  readonly faulty?: readonly (keyof BlockAttributes)[];
  /** Writes settings into the document; each attribute is one shared setting. */
  readonly update: (change: Partial<BlockAttributes>) => void;
  readonly remove: () => void;
  readonly selected: boolean;
  readonly editable: boolean;
}

/**
 * Draws a diffusion block. Handed in from above (components/diffusion-block), because the editor must not import the
 * product's components; without one the block shows its caption only.
 */
export const BlockRenderer = createContext<ComponentType<BlockViewProps> | null>(null);
