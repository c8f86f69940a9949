"use client";

import { layoutBeam } from "@weighhouse/figures/beam-layout";
import { useEffect, useRef, useState } from "react";
import { BeamDrawing } from "./beam-drawing";
import { beamInWords } from "./beam-input";
import type { BeamView } from "./beam-input";

/** Widths that the server lays out; the style sheet shows the one that suits the frame. */
const prepared = [
  { widthPx: 340, className: "beam-upright" },
  { widthPx: 700, className: "beam-middle" },
  { widthPx: 1160, className: "beam-wide" },
] as const;

/**
 * The beam. The server draws it at three widths, which needs no script; once the browser knows the
 * frame's width, it is laid out for exactly that.
 */
export function Beam({ view }: { view: BeamView }) {
  const frame = useRef<HTMLDivElement>(null);
  const [widthPx, setWidthPx] = useState<number | null>(null);
  useEffect(() => {
    const element = frame.current;
    if (element === null) return;
    const observer = new ResizeObserver(([entry]) => {
      if (entry) setWidthPx(Math.floor(entry.contentRect.width));
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  const label = beamInWords(view);
  return (
    <div ref={frame} className="beam-frame">
      {widthPx === null ? (
        prepared.map(({ widthPx: each, className }) => (
          <div key={each} className={className}>
            <BeamDrawing layout={laidOut(view, each)} view={view} label={label} />
          </div>
        ))
      ) : (
        <BeamDrawing layout={laidOut(view, widthPx)} view={view} label={label} />
      )}
    </div>
  );
}

/** Narrower than this, a beam across the page would have to cut the hypotheses' names short. */
const ACROSS_FROM_PX = 820;

function laidOut(view: BeamView, widthPx: number) {
  const direction = widthPx < ACROSS_FROM_PX ? "upright" : "horizontal";
  return layoutBeam(view.input, { widthPx, direction });
}
