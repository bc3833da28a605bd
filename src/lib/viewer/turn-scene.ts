/** The 3-D scene of a turned bond: one structure whose atoms move in place, its torsion marked, and an arc for the angle. */
import type * as NGL from 'ngl';
import type { Skeleton } from './internal-coordinates';
import { molblock } from './molblock';

type Ngl = typeof NGL;

/** As `rgb(…)`. */
export interface SceneColors {
  readonly background: string;
  /** Of the marked torsion and its angle. */
  readonly mark: string;
}

/** From where the molecule is seen: along the bond, as in the Newman projection, or from the side. */
export type Side = 'along' | 'aside';

export interface TurnScene {
  /** Moves the atoms (Å, 3N, in the frame of the Newman projection) and the arc to the angle in degrees. */
  show(x: Float64Array, angle: number): void;
  look(side: Side): void;
  recolor(colors: SceneColors): void;
  resize(): void;
  /** Where the middle of the arc is on the canvas, pixels from its lower left corner. */
  labelPlace(): { readonly x: number; readonly y: number };
  /** Calls back whenever the view moves. */
  onMove(listener: () => void): void;
  dispose(): void;
}

/** Radius of the arc, Å, and its pieces. */
const ARC = 1.15;
const LABEL = 1.75;
const PIECES = 40;
/** How much nearer than a whole view of the structure the eye stands, a share. */
const CLOSER = 0.05;
/** Turn and tilt of the view from the side, degrees; the front atom stays nearer to the eye. */
const ASIDE = { turn: 58, tilt: -18 };

/** Builds the scene in an element. Rejects where WebGL cannot be had. */
export async function createTurnScene(
  ngl: Ngl,
  element: HTMLElement,
  skeleton: Skeleton,
  torsion: readonly number[],
  x: Float64Array,
  colors: SceneColors,
): Promise<TurnScene> {
  const stage = new ngl.Stage(element, {
    backgroundColor: colors.background,
    clipDist: 0,
    tooltip: false,
  });
  const component = (await stage.loadFile(new Blob([molblock(skeleton, x)]), {
    ext: 'sdf',
  })) as NGL.StructureComponent;
  const quality = { sphereDetail: 1, radialSegments: 12 };
  component.addRepresentation('licorice', { multipleBond: 'symmetric', radius: 0.13, ...quality });
  const chain = component.addRepresentation('licorice', {
    sele: `@${torsion.join(',')}`,
    multipleBond: 'off',
    radius: 0.21,
    opacity: 0.5,
    color: colors.mark,
    ...quality,
  });
  const arc = createArc(ngl, colors.mark);
  const shape = new ngl.Shape('angle');
  shape.addBuffer(arc.buffer);
  stage.addComponentFromObject(shape)!.addRepresentation('buffer', {});
  let middle = 0;
  const scene: TurnScene = {
    show(coordinates, angle) {
      component.structure.updatePosition(coordinates as unknown as number[], false);
      component.updateRepresentations({ position: true });
      arc.spread(angle);
      middle = angle / 2;
      stage.viewer.requestRender();
    },
    look(side) {
      const matrix = stage.viewerControls.getOrientation();
      const [place, turned, zoom] = [new ngl.Vector3(), new ngl.Quaternion(), new ngl.Vector3()];
      matrix.decompose(place, turned, zoom);
      const { turn, tilt } = side === 'along' ? { turn: 0, tilt: 0 } : ASIDE;
      const radians = Math.PI / 180;
      turned.setFromEuler(new ngl.Euler(tilt * radians, turn * radians, 0));
      stage.viewerControls.orient(matrix.compose(place, turned, zoom));
    },
    recolor({ background, mark }) {
      stage.setParameters({ backgroundColor: background });
      chain.setColor(mark);
      arc.recolor(mark);
      stage.viewer.requestRender();
    },
    resize: () => stage.handleResize(),
    labelPlace() {
      const at = new ngl.Vector3(...onCircle(middle, LABEL));
      return stage.viewerControls.getPositionOnCanvas(at) as { x: number; y: number };
    },
    onMove: (listener) => stage.viewerControls.signals.changed.add(listener),
    dispose() {
      stage.dispose();
      element.replaceChildren();
    },
  };
  component.autoView(0);
  stage.viewerControls.zoom(CLOSER);
  scene.look('aside');
  return scene;
}

/** A point round the bond at an angle: clockwise from above for an eye that looks along z, whose right is -x. */
function onCircle(angle: number, radius: number): [number, number, number] {
  const radians = (angle * Math.PI) / 180;
  return [-radius * Math.sin(radians), radius * Math.cos(radians), 0];
}

/** Lines from the bond to the top, along the arc to an angle, and back. */
function createArc(ngl: Ngl, mark: string) {
  const [position1, position2] = [new Float32Array(3 * PIECES), new Float32Array(3 * PIECES)];
  const color = new Float32Array(3 * PIECES);
  const paint = (value: string): void => {
    const shares = value
      .match(/\d+/g)!
      .slice(0, 3)
      .map((part) => Number(part) / 255);
    for (let n = 0; n < color.length; n += 3) color.set(shares, n);
  };
  paint(mark);
  const buffer = new ngl.WidelineBuffer(
    { position1, position2, color, color2: color },
    { linewidth: 3, disablePicking: true },
  );
  /** Corners of the line: the bond, the arc, and the bond again. */
  const corner = (n: number, angle: number): [number, number, number] =>
    n === 0 || n === PIECES ? [0, 0, 0] : onCircle((angle * (n - 1)) / (PIECES - 2), ARC);
  return {
    buffer,
    spread(angle: number): void {
      for (let n = 0; n < PIECES; n++) {
        position1.set(corner(n, angle), 3 * n);
        position2.set(corner(n + 1, angle), 3 * n);
      }
      buffer.setAttributes({ position1, position2 });
    },
    recolor(value: string): void {
      paint(value);
      buffer.setAttributes({ color, color2: color });
    },
  };
}
