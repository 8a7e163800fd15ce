import { useRef, useState, type DragEvent, type ReactNode } from 'react';

/** A place to drop files on, and the same by button and keyboard. */
export function DropZone({ onFiles, children, small = false }: { onFiles: (files: File[]) => void; children: ReactNode; small?: boolean }) {
  const [over, setOver] = useState(false);
  const input = useRef<HTMLInputElement>(null);
  const drop = (e: DragEvent): void => {
    e.preventDefault();
    setOver(false);
    if (e.dataTransfer.files.length > 0) onFiles([...e.dataTransfer.files]);
  };
  return (
    <div className={`drop-zone ${small ? 'small-zone' : ''} ${over ? 'over' : ''}`} onDrop={drop}
      onDragOver={(e) => { e.preventDefault(); setOver(true); }} onDragLeave={() => setOver(false)}>
      <div>{children}</div>
      <button type="button" className="button" onClick={() => input.current?.click()}>Choose files</button>
      <input ref={input} type="file" multiple hidden tabIndex={-1} aria-label="Files"
        onChange={(e) => { onFiles([...(e.target.files ?? [])]); e.target.value = ''; }} />
    </div>
  );
}
