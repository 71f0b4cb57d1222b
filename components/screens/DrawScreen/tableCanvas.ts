import type { TableCanvasProps } from '@/components/canvas/CanvasGate';

/** What the page hands to the canvas, but for its layout and what the table already holds. */
export type TableCanvas = Omit<TableCanvasProps, 'layout' | 'editor' | 'live'> & { onMissing: () => void };
