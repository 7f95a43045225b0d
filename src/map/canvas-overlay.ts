import L from 'leaflet';
import { LABELS_PLACED, markBoxes } from './label-places';
import { metresPerPixelAt, type MapView, type PixelBox } from './mercator';

/** A private but long-standing method of Leaflet 1, which its own image overlays use to animate a zoom. */
type Animating = { _latLngToNewLayerPoint(at: L.LatLng, zoom: number, centre: L.LatLng): L.Point };

/** Room drawn round the visible map, as a share of its size, so that a drag shows no bare edge before it ends. */
const MARGIN = 0.25;

/** Draws and answers the boxes of the words it printed, so that other canvases keep clear of them. */
export type Draw = (view: MapView, contexts: CanvasRenderingContext2D[]) => readonly PixelBox[];

/** What each canvas of a map printed last, and in which view. */
const printed = new WeakMap<L.Map, Map<CanvasOverlay, { place: string; boxes: readonly PixelBox[] }>>();

/**
 * Stacked canvases over the map that are redrawn after each move and zoom and stretched while a zoom is animated.
 * `draw` gets cleared contexts in CSS pixels.
 */
export class CanvasOverlay extends L.Layer {
  private host: HTMLDivElement | null = null;
  private northWest: L.LatLng | null = null;
  private drawnZoom = 0;
  private marks: PixelBox[] = [];
  private view: (MapView & { marks: PixelBox[] }) | null = null;

  constructor(
    private readonly paneName: string,
    private readonly classNames: readonly string[],
    private draw: Draw,
  ) {
    super();
  }

  override onAdd(map: L.Map): this {
    this.host = L.DomUtil.create('div', 'leaflet-zoom-animated', map.getPane(this.paneName));
    for (const className of this.classNames) L.DomUtil.create('canvas', className, this.host);
    this.lay();
    // Figures drawn before the page's font has come would keep the stand-in font.
    void document.fonts.ready.then(() => this.redraw());
    return this;
  }

  override onRemove(map: L.Map): this {
    printed.get(map)?.delete(this);
    this.host?.remove();
    this.host = null;
    return this;
  }

  override getEvents(): { [name: string]: L.LeafletEventHandlerFn } {
    return { moveend: this.lay, viewreset: this.lay, resize: this.lay, [LABELS_PLACED]: this.giveWay, zoom: this.stretch, zoomanim: (event) => this.stretchTo(event as L.ZoomAnimEvent) };
  }

  /** Measuring makes the browser lay out the page, so it is done when marks or view change and not at every frame. */
  private measureMarks(): void {
    if (this.host) this.marks = markBoxes(this._map, this.host.getBoundingClientRect());
  }

  private giveWay(): void {
    this.measureMarks();
    this.redraw();
  }

  /** Draws something else in the same view. */
  setDraw(draw: Draw): void {
    this.draw = draw;
    this.redraw();
  }

  redraw(): void {
    if (!this.host || !this.view) return;
    const ratio = window.devicePixelRatio || 1;
    const contexts = [...this.host.querySelectorAll('canvas')].map((canvas) => canvas.getContext('2d')!);
    for (const context of contexts) {
      context.setTransform(1, 0, 0, 1, 0, 0);
      context.clearRect(0, 0, context.canvas.width, context.canvas.height);
      context.scale(ratio, ratio);
    }
    const shared = printed.get(this._map) ?? new Map();
    printed.set(this._map, shared);
    const place = `${this.view.zoom} ${this.view.offsetX} ${this.view.offsetY}`;
    this.view.marks = [...this.marks];
    for (const [overlay, words] of shared) if (overlay !== this && words.place === place) this.view.marks.push(...words.boxes);
    shared.set(this, { place, boxes: this.draw(this.view, contexts) });
  }

  private lay(): void {
    const map = this._map;
    if (!map || !this.host) return;
    const size = map.getSize();
    const margin = size.multiplyBy(MARGIN).round();
    const corner = map.containerPointToLayerPoint(margin.multiplyBy(-1)).round();
    const whole = size.add(margin.multiplyBy(2));
    this.northWest = map.layerPointToLatLng(corner);
    this.drawnZoom = map.getZoom();
    L.DomUtil.setTransform(this.host, corner, 1);
    this.resize(whole);
    const origin = map.getPixelOrigin().add(corner);
    const scale = 2 ** map.getZoom();
    this.view = {
      zoom: map.getZoom(),
      scale,
      offsetX: origin.x,
      offsetY: origin.y,
      width: whole.x,
      height: whole.y,
      metresPerPixel: metresPerPixelAt(map.getCenter().lat, map.getZoom()),
      seen: { left: margin.x, top: margin.y, right: margin.x + size.x, bottom: margin.y + size.y },
      marks: [],
    };
    this.giveWay();
  }

  private resize(size: L.Point): void {
    const ratio = window.devicePixelRatio || 1;
    for (const canvas of this.host!.querySelectorAll('canvas')) {
      const [width, height] = [Math.round(size.x * ratio), Math.round(size.y * ratio)];
      if (canvas.width === width && canvas.height === height) continue;
      canvas.width = width;
      canvas.height = height;
      canvas.style.width = `${size.x}px`;
      canvas.style.height = `${size.y}px`;
    }
  }

  private stretch(): void {
    if (this.host && this.northWest) L.DomUtil.setTransform(this.host, this._map.latLngToLayerPoint(this.northWest), this._map.getZoomScale(this._map.getZoom(), this.drawnZoom));
  }

  private stretchTo(event: L.ZoomAnimEvent): void {
    if (!this.host || !this.northWest) return;
    const corner = (this._map as unknown as Animating)._latLngToNewLayerPoint(this.northWest, event.zoom, event.center);
    L.DomUtil.setTransform(this.host, corner, this._map.getZoomScale(event.zoom, this.drawnZoom));
  }
}

/** Pane above the tiles; made once per map. Panes below the marks let the pointer through. */
export function ensurePane(map: L.Map, name: string, zIndex: number): string {
  const pane = map.getPane(name) ?? map.createPane(name);
  pane.style.zIndex = String(zIndex);
  pane.style.pointerEvents = 'none';
  return name;
}
