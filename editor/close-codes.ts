/** What the websocket server and the editor say to each other beside the stock frames (integrity rule C13). */

/** Frame types beside the stock ones (0 sync, 1 awareness). 104 {seq}: results were projected up to seq; 105: title or date changed. */
export const FRAME = {
  sync: 0,
  awareness: 1,
  ack: 100,
  refused: 101,
  state: 102,
  hello: 103,
  projected: 104,
  entry: 105,
} as const;

/** Why a frame was refused. The text stays in the page, marked, with what to do. */
export const REFUSALS = [
  'locked',
  'forbidden',
  'foreign-id',
  'gap',
  'too-big',
  'schema',
  'full',
  'slow-down',
  'storage',
] as const;
export type Refusal = (typeof REFUSALS)[number];

/** Close codes; from 4400 on the client does not reconnect by itself. */
export const CLOSE = {
  notSignedIn: 4401,
  noRight: 4403,
  unknown: 4404,
  otherEpoch: 4409,
  reload: 4426,
  tooBig: 1009,
  overloaded: 1013,
} as const;

/** Number of the document schema; raised when a node or mark is added or changes meaning. */
export const SCHEMA_VERSION = 1;
