/** The command reference, from the program's own help. */
import { ringtrueProgram } from '../../packages/cli/src/program.js';

type Command = ReturnType<typeof ringtrueProgram>;

/** Help exactly as printed, on a terminal of 100 columns. */
function helpOf(command: Command): string {
  let words = '';
  command.configureOutput({
    writeOut: (text) => {
      words += text;
    },
    getOutHelpWidth: () => 100,
    getOutHasColors: () => false,
  });
  command.outputHelp();
  return words.trimEnd();
}

export function commandPage(): string {
  const program = ringtrueProgram();
  const section = (command: Command, title: string): string => `## ${title}\n\n\`\`\`text\n${helpOf(command)}\n\`\`\`\n`;
  return [
    '# Commands\n\nMade by `npm run docs` from `--help`; exit codes: 0 done, 2 input or options unusable, 1 a fault of the program.\n',
    section(program, 'ringtrue'),
    ...program.commands.map((command) => section(command, `ringtrue ${command.name()}`)),
  ].join('\n');
}
