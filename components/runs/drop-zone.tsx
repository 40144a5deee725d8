'use client';

import { type ReactNode, useRef } from 'react';
import { useDropzone } from 'react-dropzone';
import { Button } from '@/components/ui/button';
import { cn } from '@/components/ui/cn';
import { acceptedPictures } from '@/lib/client/files';
import { useShortcuts } from '@/lib/client/shortcuts';

/** The whole panel takes files that are dropped on it; a button and a key open the picker. */
export function DropZone({
  disabled,
  onFiles,
  children,
}: {
  disabled: boolean;
  onFiles: (files: File[]) => void;
  children: ReactNode;
}) {
  const { getRootProps, getInputProps, isDragActive } = useDropzone({
    // Everything is let through: the queue says of each file why it can't be used.
    onDrop: (files) => onFiles(files),
    noClick: true,
    noKeyboard: true,
    disabled,
  });
  return (
    <div
      {...getRootProps()}
      className={cn(
        'rounded-panel bg-panel p-5 max-sm:p-4',
        isDragActive && 'outline-3 outline-ink outline-dashed -outline-offset-6',
      )}
    >
      <input {...getInputProps()} aria-label="Photographs" />
      {children}
    </div>
  );
}

/** Opens the file picker, in which pictures are shown first. */
export function PickButton({
  onFiles,
  primary = false,
}: {
  onFiles: (files: File[]) => void;
  primary?: boolean;
}) {
  const input = useRef<HTMLInputElement>(null);
  const open = () => input.current?.click();
  useShortcuts([{ key: 'u', label: 'Choose photographs', run: open }]);
  return (
    <>
      <input
        ref={input}
        type="file"
        multiple
        hidden
        tabIndex={-1}
        data-testid="pick"
        accept={Object.values(acceptedPictures).flat().join(',')}
        onChange={(event) => {
          onFiles([...(event.target.files ?? [])]);
          event.target.value = '';
        }}
      />
      <Button
        variant={primary ? 'ink' : 'quiet'}
        size={primary ? 'bench' : 'normal'}
        hint="U"
        onClick={open}
      >
        Choose photographs
      </Button>
    </>
  );
}
