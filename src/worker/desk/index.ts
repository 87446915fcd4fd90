/** What an editor asks beyond the engine's protocol, answered where the engine lives. */
import type { Engine } from '../../engine.ts';
import { consult } from './consult.ts';
import { noteReadings } from './notes.ts';
import { createPictureMaker } from './picture/index.ts';
import { forms } from './proposals/forms.ts';
import { translated } from './proposals/translation.ts';
import { replacement } from './proposals/helper.ts';
import { proposals } from './proposals/index.ts';
import type { DeskAnswer, DeskRequest } from './types.ts';

export interface Desk {
  /** Never rejects: a defect becomes a failure of the protocol. */
  ask(request: DeskRequest): Promise<DeskAnswer>;
}

export function createDesk(room: { readonly engine: Engine; readonly loadFile: (name: string) => Promise<Uint8Array> }): Desk {
  const pictures = createPictureMaker(room.loadFile);
  const dispatch = (request: DeskRequest): DeskAnswer | Promise<DeskAnswer> => {
    switch (request.desk) {
      case 'consult':
        return consult(request, room.engine);
      case 'proposals':
        return { proposals: proposals(request) };
      case 'replacement':
        return { proposals: [replacement(request)] };
      case 'forms':
        return { proposals: forms(request) };
      case 'picture':
        return pictures.picture(request);
      case 'translation':
        return { code: translated(request) };
      case 'notes':
        return { notes: noteReadings(request.text, request.language) };
    }
  };
  return {
    ask: async (request) => {
      try {
        return await dispatch(request);
      } catch (error) {
        return { ok: false, error: { code: 'undecided', message: `The tool met a defect of its own (${error instanceof Error ? error.message : String(error)}); please report the expression.` } };
      }
    },
  };
}
