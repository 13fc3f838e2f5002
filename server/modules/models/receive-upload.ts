import { open, rm } from 'node:fs/promises';
import type { Request, RequestHandler } from 'express';
import multer, { diskStorage, MulterError } from 'multer';
import {
  type ApiError,
  createRequestInvalid,
  createTooLarge,
  createWrongContentType,
} from '../../platform/http/api-error.js';
import type { CreateId } from '../../platform/ids/create-id.js';
import { createNotAModel } from './models.errors.js';
import type { ReceivedFile } from './models.service.js';
import { SNIFFED_BYTES, sniffModel } from './sniff-model.js';

/** Room for the form around the file. */
const FORM_BYTES = 64 * 1024;
const LONGEST_NAME = 1_000;

/**
 * Receives one file of a form into the incoming folder, never whole in memory. A refused or broken
 * off upload leaves nothing there.
 */
export function createUploadReceiver(options: {
  folder: string;
  maxBytes: number;
  createId: CreateId;
}): RequestHandler[] {
  const tooLarge = () =>
    createTooLarge(
      `The file is larger than the ${megabytes(options.maxBytes)} MB that are allowed.`,
    );
  const receive = multer({
    storage: diskStorage({
      destination: options.folder,
      filename: (_req, _file, done) => done(null, `${options.createId()}.upload`),
    }),
    limits: {
      fileSize: options.maxBytes,
      files: 1,
      fields: 4,
      fieldSize: 4 * LONGEST_NAME,
      fieldNameSize: 100,
      parts: 6,
    },
    defParamCharset: 'utf8',
  }).single('file');

  return [
    (req, _res, next) => {
      if (!req.is('multipart/form-data'))
        throw createWrongContentType('Send the file as a form with the field “file”.');
      // Known before a byte of the file has come: do not let anyone wait for a refusal.
      if (Number(req.headers['content-length'] ?? 0) > options.maxBytes + FORM_BYTES)
        throw tooLarge();
      next();
    },
    (req, res, next) => {
      receive(req, res, (error: unknown) => next(error ? translate(error, tooLarge) : undefined));
    },
  ];
}

function translate(error: unknown, tooLarge: () => ApiError): unknown {
  if (error instanceof MulterError) return error.code === 'LIMIT_FILE_SIZE' ? tooLarge() : error;
  const message = error instanceof Error ? error.message : '';
  // Texts of busboy and multer for a form that is broken or broken off; they carry no code. A
  // control character in the file's name makes the header of its part unreadable.
  if (message === 'Malformed part header')
    return createRequestInvalid(
      'The file’s name cannot be read. Rename it without control characters and try again.',
    );
  if (/^(Multipart|Malformed|Unexpected end of form|Request (aborted|closed))/.test(message))
    return createRequestInvalid('The upload was broken off or its form is not valid.');
  return error;
}

/**
 * The file that was received.
 * @throws 400 when there is none or it is empty, 415 when it is certainly no model; it is gone then
 */
export async function receivedFile(req: Request): Promise<ReceivedFile> {
  const { file } = req;
  if (!file) throw createRequestInvalid('Choose a file to upload.');
  const refusal = await refusalOf({ ...file, name: file.originalname });
  if (refusal) {
    await discardUpload(req);
    throw refusal;
  }
  return { path: file.path, fileName: file.originalname, bytes: file.size };
}

/** Removes a received file that was not taken in. */
export async function discardUpload(req: Request): Promise<void> {
  if (req.file) await rm(req.file.path, { force: true });
}

async function refusalOf(file: {
  path: string;
  size: number;
  name: string;
}): Promise<ApiError | null> {
  if (file.size === 0) return createRequestInvalid('The file is empty.');
  const handle = await open(file.path);
  try {
    const { buffer, bytesRead } = await handle.read(
      Buffer.alloc(SNIFFED_BYTES),
      0,
      SNIFFED_BYTES,
      0,
    );
    const reason = sniffModel(buffer.subarray(0, bytesRead), file.size, file.name);
    return reason ? createNotAModel(reason) : null;
  } finally {
    await handle.close();
  }
}

function megabytes(bytes: number): string {
  return Number((bytes / 1024 / 1024).toPrecision(3)).toString();
}
