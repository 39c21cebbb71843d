import { chamberTool, keepOutTool } from './chamber-tool.ts';
import { channelTool } from './channel-tool.ts';
import { chamberRowTool, gradientTreeTool, postsTool, serpentineTool, splitTreeTool } from './maker-tools.ts';
import { measureTool } from './measure-tool.ts';
import { portTool, viaTool } from './point-tools.ts';
import { selectTool } from './select-tool.ts';
import type { Outcome, Preview, Scope, Tool, ToolEvent, ToolName } from './tool.ts';

/** A tool with its state, as one thing that takes events: whoever holds it need not know which tool it is. */
export interface Hand {
  readonly name: ToolName;
  on(event: ToolEvent, scope: Scope): Omit<Outcome<unknown>, 'state'> & { readonly hand: Hand };
  preview(scope: Scope): Preview;
}

function hold<S>(tool: Tool<S>, state: S): Hand {
  return {
    name: tool.name,
    on: (event, scope) => {
      const { state: next, ...rest } = tool.on(state, event, scope);
      return { ...rest, hand: hold(tool, next) };
    },
    preview: (scope) => tool.preview(state, scope),
  };
}

const TAKE: Readonly<Record<ToolName, (scope: Scope) => Hand>> = {
  select: (scope) => hold(selectTool, selectTool.start(scope)),
  channel: (scope) => hold(channelTool, channelTool.start(scope)),
  chamber: (scope) => hold(chamberTool, chamberTool.start(scope)),
  port: (scope) => hold(portTool, portTool.start(scope)),
  via: (scope) => hold(viaTool, viaTool.start(scope)),
  serpentine: (scope) => hold(serpentineTool, serpentineTool.start(scope)),
  'split tree': (scope) => hold(splitTreeTool, splitTreeTool.start(scope)),
  'gradient tree': (scope) => hold(gradientTreeTool, gradientTreeTool.start(scope)),
  'row of chambers': (scope) => hold(chamberRowTool, chamberRowTool.start(scope)),
  posts: (scope) => hold(postsTool, postsTool.start(scope)),
  'keep-out': (scope) => hold(keepOutTool, keepOutTool.start(scope)),
  measure: (scope) => hold(measureTool, measureTool.start(scope)),
};

/** The tool of a name, taken up afresh. */
export const take = (name: ToolName, scope: Scope): Hand => TAKE[name](scope);
