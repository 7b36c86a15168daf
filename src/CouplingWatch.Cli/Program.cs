using System.CommandLine;
using CouplingWatch.Cli.Check;
using CouplingWatch.Cli.Examine;
using CouplingWatch.Cli.Rehearse;
using CouplingWatch.Cli.Sending;

var root = new RootCommand("Judges residual streams of coupled runs without a server, and talks to one.")
{
    ExamineCommand.Create(),
    CheckCommand.Create(),
    SendCommands.Send(),
    SendCommands.Follow(),
    CloseCommand.Create(),
    RehearseCommand.Create(),
};
return await root.Parse(args).InvokeAsync();
