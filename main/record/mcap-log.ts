import { type FileHandle, open, rm, stat } from 'node:fs/promises';
import { crc32 } from 'node:zlib';
import { McapChunkBuilder, McapRecordBuilder, type McapTypes } from '@mcap/core';
import { LogLost } from './disk-trouble.ts';

/** A JSON channel of the log. */
export interface LogChannel {
  readonly topic: string;
  readonly schemaName: string;
  readonly jsonSchema: unknown;
}
export interface LogMessage {
  /** Index into the channels the log was opened with. */
  readonly channel: number;
  /** UTC, nanoseconds. */
  readonly time: bigint;
  readonly data: Uint8Array;
}

/**
 * An MCAP file whose chunks are closed when we say so, which the library's own writer leaves to their size. Every
 * `write` is one chunk, on disk (fdatasync) when it resolves; what is on disk before stays readable whatever follows.
 */
export interface McapLog {
  readonly path: string;
  bytes(): number;
  /** Rejects when nothing of `messages` is to be counted on; the file then still ends after its last whole chunk. */
  write(messages: readonly LogMessage[]): Promise<void>;
  /** Index and footer, and closes the file. */
  end(): Promise<void>;
  /** Lets go of a log that cannot be written any more. */
  abandon(): Promise<void>;
}

/** Begins a log. Rejects with `EEXIST` where there is a file already; otherwise leaves none behind when it fails. */
export const createMcapLog = async (
  path: string,
  channels: readonly LogChannel[],
  facts: ReadonlyMap<string, string>,
): Promise<McapLog> => {
  const file = await open(path, 'wx');
  const inode = (await file.stat()).ino;
  const schemas = channels.map((channel, i) => ({
    id: i + 1,
    name: channel.schemaName,
    encoding: 'jsonschema',
    data: new TextEncoder().encode(JSON.stringify(channel.jsonSchema)),
  }));
  const topics = channels.map((channel, i) => ({
    id: i,
    schemaId: i + 1,
    topic: channel.topic,
    messageEncoding: 'json',
    metadata: new Map<string, string>(),
  }));
  const indices: McapTypes.ChunkIndex[] = [];
  let counts = new Map<number, bigint>();
  let position = 0;

  const writeAll = async (bytes: Uint8Array): Promise<void> => {
    try {
      // A deleted file would go on taking bytes that nobody can ever read.
      if ((await stat(path)).ino !== inode) throw new LogLost('the log was replaced by another file');
      await writeFully(file, bytes, position);
      await file.datasync();
    } catch (error) {
      await file.truncate(position).catch(() => {});
      throw error;
    }
    position += bytes.length;
  };

  const head = new McapRecordBuilder();
  head.writeMagic();
  head.writeHeader({ profile: '', library: 'foldback' });
  for (const schema of schemas) head.writeSchema(schema);
  for (const topic of topics) head.writeChannel(topic);
  const metadataStart = BigInt(head.length);
  const metadataLength = head.writeMetadata({ name: 'mission', metadata: new Map(facts) });
  const metadataIndex = { name: 'mission', offset: metadataStart, length: metadataLength };
  try {
    await writeAll(head.buffer);
  } catch (error) {
    await file.close().catch(() => {});
    await rm(path, { force: true }).catch(() => {});
    throw error;
  }

  return {
    path,
    bytes: () => position,
    write: async (messages) => {
      if (messages.length === 0) return;
      const after = new Map(counts);
      const { bytes, index } = chunkOf(messages, BigInt(position), after);
      await writeAll(bytes);
      indices.push(index);
      counts = after;
    },
    end: async () => {
      try {
        await writeAll(tailOf({ position, schemas, topics, indices, counts, metadataIndex }));
      } finally {
        await file.close();
      }
    },
    abandon: () => file.close().catch(() => {}),
  };
};

/** One chunk with its message index, and the entry it gets in the summary; `counts` number the messages of a channel. */
const chunkOf = (
  messages: readonly LogMessage[],
  start: bigint,
  counts: Map<number, bigint>,
): { bytes: Uint8Array; index: McapTypes.ChunkIndex } => {
  const builder = new McapChunkBuilder({ useMessageIndex: true });
  for (const { channel, time, data } of messages) {
    const count = counts.get(channel) ?? 0n;
    counts.set(channel, count + 1n);
    builder.addMessage({
      channelId: channel,
      sequence: Number(count & 0xffffffffn),
      logTime: time,
      publishTime: time,
      data,
    });
  }
  const times = { messageStartTime: builder.messageStartTime, messageEndTime: builder.messageEndTime };
  const records = builder.buffer;
  const size = BigInt(records.length);
  const record = new McapRecordBuilder();
  const chunkLength = record.writeChunk({
    ...times,
    uncompressedSize: size,
    uncompressedCrc: crc32(records),
    compression: '',
    records,
  });
  const indexStart = BigInt(record.length);
  const offsets = new Map<number, bigint>();
  for (const index of builder.indices) {
    offsets.set(index.channelId, start + BigInt(record.length));
    record.writeMessageIndex(index);
  }
  const index: McapTypes.ChunkIndex = {
    ...times,
    chunkStartOffset: start,
    chunkLength,
    messageIndexOffsets: offsets,
    messageIndexLength: BigInt(record.length) - indexStart,
    compression: '',
    compressedSize: size,
    uncompressedSize: size,
  };
  return { bytes: record.buffer.slice(), index };
};

interface Summary {
  readonly position: number;
  readonly schemas: readonly McapTypes.Schema[];
  readonly topics: readonly McapTypes.Channel[];
  readonly indices: readonly McapTypes.ChunkIndex[];
  readonly counts: ReadonlyMap<number, bigint>;
  readonly metadataIndex: McapTypes.MetadataIndex;
}

/** Data end, summary, footer and magic (MCAP specification, file structure). */
const tailOf = (summary: Summary): Uint8Array => {
  const record = new McapRecordBuilder();
  record.writeDataEnd({ dataSectionCrc: 0 });
  const summaryStart = BigInt(summary.position + record.length);
  for (const schema of summary.schemas) record.writeSchema(schema);
  for (const topic of summary.topics) record.writeChannel(topic);
  const starts = summary.indices.map((index) => index.messageStartTime);
  const ends = summary.indices.map((index) => index.messageEndTime);
  record.writeStatistics({
    messageCount: [...summary.counts.values()].reduce((sum, count) => sum + count, 0n),
    schemaCount: summary.schemas.length,
    channelCount: summary.topics.length,
    attachmentCount: 0,
    metadataCount: 1,
    chunkCount: summary.indices.length,
    messageStartTime: starts.reduce((a, b) => (b < a ? b : a), starts[0] ?? 0n),
    messageEndTime: ends.reduce((a, b) => (b > a ? b : a), ends[0] ?? 0n),
    channelMessageCounts: new Map(summary.counts),
  });
  record.writeMetadataIndex(summary.metadataIndex);
  for (const index of summary.indices) record.writeChunkIndex(index);
  record.writeFooter({ summaryStart, summaryOffsetStart: 0n, summaryCrc: 0 });
  record.writeMagic();
  return record.buffer.slice();
};

const writeFully = async (file: FileHandle, bytes: Uint8Array, position: number): Promise<void> => {
  let done = 0;
  while (done < bytes.length) {
    const { bytesWritten } = await file.write(bytes, done, bytes.length - done, position + done);
    if (bytesWritten === 0) throw new Error('the disk takes no more bytes');
    done += bytesWritten;
  }
};
