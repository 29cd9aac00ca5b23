"use client";

import { useEffect, useRef, useState, useSyncExternalStore } from "react";
import { Button } from "./button";
import { Dialog } from "./dialog";

type Detector = { detect: (from: HTMLVideoElement) => Promise<readonly { rawValue: string }[]> };
type WithDetector = typeof globalThis & { BarcodeDetector?: new () => Detector };

const LOOK_EVERY_MS = 200;

const never = () => () => {};
const canScan = () => (globalThis as WithDetector).BarcodeDetector !== undefined && navigator.mediaDevices !== undefined;

/** Reads a bar code or QR code with the camera; not there where the browser cannot. Hand scanners type by themselves. */
export function ScanButton({ onRead }: { onRead: (text: string) => void }) {
  const [isOpen, setOpen] = useState(false);
  const possible = useSyncExternalStore(never, canScan, () => false);
  if (!possible) return null;
  return (
    <>
      <Button onClick={() => setOpen(true)}>Scan</Button>
      {isOpen && (
        <Camera
          onClose={() => setOpen(false)}
          onRead={(text) => {
            setOpen(false);
            onRead(text);
          }}
        />
      )}
    </>
  );
}

function Camera({ onRead, onClose }: { onRead: (text: string) => void; onClose: () => void }) {
  const video = useRef<HTMLVideoElement>(null);
  const [problem, setProblem] = useState<string>();
  const read = useRef(onRead);
  useEffect(() => {
    read.current = onRead;
  });

  useEffect(() => {
    const Maker = (globalThis as WithDetector).BarcodeDetector;
    const picture = video.current;
    if (!Maker || !picture) return;
    const detector = new Maker();
    const ended = new AbortController();
    let stream: MediaStream | undefined;
    const look = setInterval(() => {
      if (picture.readyState < HTMLMediaElement.HAVE_CURRENT_DATA) return;
      void detector.detect(picture).then(([code]) => code && !ended.signal.aborted && read.current(code.rawValue), () => undefined);
    }, LOOK_EVERY_MS);
    navigator.mediaDevices.getUserMedia({ video: { facingMode: "environment" } }).then(
      (given) => {
        stream = given;
        if (ended.signal.aborted) stopAll(given);
        else picture.srcObject = given;
      },
      () => setProblem("The camera is not available. Allow it in the browser, or type the code."),
    );
    return () => {
      ended.abort();
      clearInterval(look);
      if (stream) stopAll(stream);
    };
  }, []);

  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title="Scan" description={problem ?? "Hold the code on the label in front of the camera."}>
      <video ref={video} className="mt-3 w-full" autoPlay muted playsInline />
      <div className="buttons"><Button look="link" onClick={onClose}>Type it instead</Button></div>
    </Dialog>
  );
}

const stopAll = (stream: MediaStream) => stream.getTracks().forEach((track) => track.stop());
