import { clampViewport } from '@/lib/editor/kernels/viewport';
import type { Editor } from '@/lib/editor/store';
import { createToolMachine, type PointerInput } from '@/lib/editor/tools/machine';
import type { CellPoint } from '@/lib/editor/types';
import { bandRange } from './bandRange';
import type { Rect } from './draw/shapes';
import type { TableCanvasProps } from './types';

type Zone = 'grid' | 'axis' | 'band' | 'rows' | 'views';

const SWIPE_PX = 48;

const inside = (rect: Rect | null, x: number, y: number, grow = 0): boolean =>
  rect !== null &&
  x >= rect.x - grow &&
  x < rect.x + rect.width + grow &&
  y >= rect.y - grow &&
  y < rect.y + rect.height + grow;

function zoneAt({ layout, onSwipe }: TableCanvasProps, x: number, y: number): Zone | null {
  if (inside(layout.grid, x, y)) return 'grid';
  if (inside(layout.band, x, y, 10)) return 'band';
  if (inside(layout.straightedge, x, y)) return 'axis';
  const isBesideRows = y >= layout.grid.y && y < layout.grid.y + layout.grid.height;
  if (isBesideRows && (x < layout.grid.x || inside(layout.peaks, x, y))) return 'rows';
  if (onSwipe && y > layout.straightedge.y + layout.straightedge.height) return 'views';
  if (inside(layout.spectrum, x, y)) return 'axis';
  return null;
}

/**
 * Raw pointers and the wheel of the canvas to tools and viewport. One finger on the grid draws, a second one takes the
 * stroke back and moves or pinches; the axis and the spectrum move and zoom as the grid does; rows choose a symbol.
 */
export function listenToPointers(
  node: HTMLElement,
  editor: Editor,
  props: () => TableCanvasProps,
  onHover: (cell: CellPoint | null) => void,
): { stop(): void; cancelStroke(): boolean } {
  const machine = createToolMachine(editor, { oneFingerMoves: () => props().oneFingerMoves, onHover });
  const pressed = new Map<number, { zone: Zone; startX: number; startY: number; lastX: number }>();
  const view = () => editor.session.getState().viewport;
  const size = () => editor.document.settings;

  function place(event: PointerEvent | WheelEvent): { x: number; y: number } {
    const box = node.getBoundingClientRect();
    return { x: event.clientX - box.left, y: event.clientY - box.top };
  }

  function inputOf(event: PointerEvent, x: number, y: number): PointerInput {
    const { layout, readOnly } = props();
    const draws = !['pan', 'pick'].includes(editor.session.getState().tool);
    return {
      pointerId: event.pointerId,
      kind: event.pointerType === 'touch' || event.pointerType === 'pen' ? event.pointerType : 'mouse',
      // Where nothing may be drawn, a press moves the drawing, as the middle button does.
      button: readOnly && draws && event.button === 0 ? 1 : event.button,
      xPx: x - layout.grid.x,
      yPx: y - layout.grid.y,
    };
  }

  function moveBand(x: number): void {
    const { band } = props().layout;
    if (!band) return;
    const { cells } = editor.document;
    const { fftSize, symbolCount } = size();
    const now = view();
    const { from, to } = bandRange({ cells, fftSize, symbolCount }, now);
    const middle = from + ((x - band.x) / band.width) * (to - from);
    const shown = (now.turned ? now.heightPx : now.widthPx) / now.subcarrierPx;
    editor.set({ viewport: clampViewport({ ...now, firstPosition: middle - shown / 2 }, size()) });
  }

  /** Bar and spectrum are dragged along the band, whichever way the grid lies. */
  function moveAxis(dxPx: number): void {
    const now = view();
    const { grid } = props().layout;
    const along = now.turned ? now.heightPx : now.widthPx;
    const positions = (dxPx / grid.width) * (along / now.subcarrierPx);
    editor.set({ viewport: clampViewport({ ...now, firstPosition: now.firstPosition - positions }, size()) });
  }

  function chooseRow(y: number): void {
    const { grid } = props().layout;
    const symbol = Math.floor(view().firstSymbol + (y - grid.y) / view().symbolPx);
    if (!view().turned && symbol >= 0 && symbol < size().symbolCount) editor.set({ chosenSymbol: symbol });
  }

  function down(event: PointerEvent): void {
    const { x, y } = place(event);
    const zone = zoneAt(props(), x, y);
    if (!zone) return;
    node.setPointerCapture(event.pointerId);
    pressed.set(event.pointerId, { zone, startX: x, startY: y, lastX: x });
    if (zone === 'grid') {
      machine.pointerDown(inputOf(event, x, y));
      node.querySelector<HTMLElement>('#grid')?.focus({ preventScroll: true });
    } else if (zone === 'band') moveBand(x);
    else if (zone === 'rows') chooseRow(y);
    // The browser must not start a text selection or a scroll; focus was set by hand.
    event.preventDefault();
  }

  function move(event: PointerEvent): void {
    const { x, y } = place(event);
    const press = pressed.get(event.pointerId);
    if (!press) {
      if (event.pointerType === 'touch') return;
      if (zoneAt(props(), x, y) === 'grid') machine.pointerMove(inputOf(event, x, y));
      else machine.pointerLeave();
      return;
    }
    if (press.zone === 'grid') machine.pointerMove(inputOf(event, x, y));
    else if (press.zone === 'band') moveBand(x);
    else if (press.zone === 'axis') moveAxis(x - press.lastX);
    press.lastX = x;
  }

  function up(event: PointerEvent): void {
    const { x, y } = place(event);
    const press = pressed.get(event.pointerId);
    pressed.delete(event.pointerId);
    if (!press) return;
    if (press.zone === 'grid') {
      machine.pointerUp(inputOf(event, x, y));
      if (event.pointerType === 'touch') machine.pointerLeave();
    }
    const dx = x - press.startX;
    if (press.zone === 'views' && Math.abs(dx) > SWIPE_PX && Math.abs(dx) > 2 * Math.abs(y - press.startY))
      props().onSwipe?.(dx < 0 ? 1 : -1);
  }

  function cancel(event: PointerEvent): void {
    if (pressed.get(event.pointerId)?.zone === 'grid') machine.pointerCancel(event.pointerId);
    pressed.delete(event.pointerId);
  }

  function wheel(event: WheelEvent): void {
    const { x, y } = place(event);
    const zone = zoneAt(props(), x, y);
    if (zone !== 'grid' && zone !== 'axis' && zone !== 'rows') return;
    event.preventDefault();
    const { grid } = props().layout;
    const scale = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? 33 : 1;
    machine.wheel({
      xPx: x - grid.x,
      yPx: y - grid.y,
      dxPx: event.deltaX * scale,
      dyPx: event.deltaY * scale,
      ctrlKey: event.ctrlKey,
      shiftKey: event.shiftKey,
      altKey: event.altKey,
    });
  }

  const leave = () => machine.pointerLeave();
  // Both a Ctrl-press's menu and a long press's would cut a stroke short.
  const menu = (event: Event) => event.preventDefault();
  node.addEventListener('pointerdown', down);
  node.addEventListener('pointermove', move);
  node.addEventListener('pointerup', up);
  node.addEventListener('pointercancel', cancel);
  node.addEventListener('pointerleave', leave);
  node.addEventListener('contextmenu', menu);
  node.addEventListener('wheel', wheel, { passive: false });
  return {
    stop() {
      machine.cancel();
      node.removeEventListener('pointerdown', down);
      node.removeEventListener('pointermove', move);
      node.removeEventListener('pointerup', up);
      node.removeEventListener('pointercancel', cancel);
      node.removeEventListener('pointerleave', leave);
      node.removeEventListener('contextmenu', menu);
      node.removeEventListener('wheel', wheel);
    },
    cancelStroke: () => machine.cancel(),
  };
}
