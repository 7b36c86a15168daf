using CouplingWatch.Cli.Check;
using CouplingWatch.Cli.Sending;
using CouplingWatch.Client;
using CouplingWatch.Records;
using CouplingWatch.Testing;
using CouplingWatch.Testing.Servers;

namespace CouplingWatch.Cli.Tests.Sending;

public sealed class SendingCommandTests
{
    private static readonly Uri Address = new("http://watch.test:5000");
    private readonly FakeServer server = new();
    private readonly StringWriter output = new();
    private readonly StringWriter errors = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    private RunSenderOptions Options => new() { Handler = server, FirstBackOff = TimeSpan.FromMilliseconds(1), LongestBackOff = TimeSpan.FromMilliseconds(2) };

    [Fact]
    public async Task A_recording_is_sent_and_its_run_closed()
    {
        var file = new FileInfo(ReferenceData.Path("recordings", "c17-silent.ndjson"));
        Assert.Equal(0, await SendCommands.RunAsync(file, Address, null, false, Options, output, errors, Cancel));
        Assert.Contains("of run c17-silent delivered", output.ToString(), StringComparison.Ordinal);
        Assert.Equal(0, await CloseCommand.RunAsync("c17-silent", Address, CloseOutcome.Aborted, "wall limit", Options, output, errors, Cancel));
        Assert.Equal(CloseOutcome.Aborted, Assert.IsType<CloseRecord>(server.Kept[^1]).Outcome);
        Assert.Equal("", errors.ToString());
    }

    [Fact]
    public async Task What_cannot_be_done_is_said_on_the_error_stream_with_exit_code_2()
    {
        Assert.Equal(2, await SendCommands.RunAsync(new FileInfo("no-such.ndjson"), Address, null, false, Options, output, errors, Cancel));
        Assert.Equal(2, await SendCommands.RunAsync(new FileInfo("Not Allowed.ndjson"), Address, null, false, Options, output, errors, Cancel));
        Assert.Equal(2, await CloseCommand.RunAsync("nobody", Address, CloseOutcome.Aborted, null, Options, output, errors, Cancel));
        server.Down = true;
        var file = new FileInfo(ReferenceData.Path("recordings", "c20-level-0-steady.ndjson"));
        Assert.Equal(2, await SendCommands.RunAsync(file, Address, null, false, Options, output, errors, Cancel));
        foreach (var word in (string[])["no-such.ndjson", "\"Not Allowed\" is no name", "there is no run nobody", "given up after 8 tries"])
            Assert.Contains(word, errors.ToString(), StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_server_is_checked_for_being_ready_and_a_name_for_being_free()
    {
        Assert.Equal(0, await ServerCheck.RunAsync(Address, "leaf", server, output, Cancel));
        Assert.Contains("The name leaf is free.", output.ToString(), StringComparison.Ordinal);
        server.Add(new OpenRecord { Seq = 0, Fields = [new FieldDeclaration { Name = "a" }] });
        Assert.Equal(2, await ServerCheck.RunAsync(Address, "leaf", server, output, Cancel));
        Assert.Contains("is taken", output.ToString(), StringComparison.Ordinal);
        Assert.Equal(2, await ServerCheck.RunAsync(Address, "Leaf", server, output, Cancel));
        server.Down = true;
        Assert.Equal(2, await ServerCheck.RunAsync(Address, null, server, output, Cancel));
        Assert.Contains("does not answer", output.ToString(), StringComparison.Ordinal);
    }
}
