/** Writes files into a zip one after the other, each only when the one before it has gone out, and sums them up. */
import { createHash } from 'node:crypto';
import { once } from 'node:events';
import { Readable } from 'node:stream';
import { ZipArchive } from 'archiver';
import type { BundleFile } from './bundle-parts';

export interface ArchiveWriter {
  readonly add: (file: BundleFile) => Promise<void>;
  /** Adds a file in pieces that are made while it goes out, whatever its size. */
  readonly addLines: (path: string, lines: AsyncIterable<string>) => Promise<void>;
  /** SHA-256 of every file that was added, by its path. */
  readonly sums: Readonly<Record<string, string>>;
}

/** Opens a zip that `fill` writes while it is read; an error there ends the stream without an end of the zip. */
export function openArchive(fill: (writer: ArchiveWriter) => Promise<void>): ZipArchive {
  const archive = new ZipArchive({ zlib: { level: 6 } });
  fill(writerOf(archive))
    .then(() => archive.finalize())
    .catch((error: unknown) =>
      archive.destroy(error instanceof Error ? error : new Error(String(error))),
    );
  return archive;
}

function writerOf(archive: ZipArchive): ArchiveWriter {
  const sums: Record<string, string> = {};
  const append = async (path: string, content: Buffer | Readable): Promise<void> => {
    const written = once(archive, 'entry');
    archive.append(content, { name: path });
    await written;
  };
  return {
    sums,
    add: async ({ path, content }) => {
      const bytes = Buffer.from(content, 'utf8');
      sums[path] = createHash('sha256').update(bytes).digest('hex');
      await append(path, bytes);
    },
    addLines: async (path, lines) => {
      const hash = createHash('sha256');
      async function* hashed(): AsyncGenerator<Buffer> {
        for await (const line of lines) {
          const bytes = Buffer.from(line, 'utf8');
          hash.update(bytes);
          yield bytes;
        }
      }
      await append(path, Readable.from(hashed(), { objectMode: false }));
      sums[path] = hash.digest('hex');
    },
  };
}
