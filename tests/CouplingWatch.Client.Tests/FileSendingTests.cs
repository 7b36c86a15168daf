using System.Text.Json;
using CouplingWatch.Recordings;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Client.Tests;

public sealed class FileSendingTests : IDisposable
{
    private readonly DirectoryInfo folder = Directory.CreateTempSubdirectory("couplingwatch-");
    private readonly FakeTimeProvider time = new();

    private RunSender Start() => RunSender.Start(null, "leaf", new OpenRecord { Fields = [new FieldDeclaration { Name = "a" }] }, new RunSenderOptions { Folder = folder.FullName, Time = time, CloseTimeout = RunSenderOptions.LongestTimeout });

    public void Dispose() => folder.Delete(true);

    [Fact]
    public async Task Without_a_server_the_records_are_appended_to_a_file_that_reads_as_a_recording()
    {
        var sender = Start();
        for (var i = 0; i < 30; i++) sender.Send(new IterationRecord { Step = 0, Iteration = i, Residuals = NamedValues.Of(("a", 1)) });
        Assert.True(await time.Until(sender.CloseAsync(CloseOutcome.Finished)));
        Assert.Equal(Path.Combine(folder.FullName, "leaf.ndjson"), sender.FileName);
        var kinds = new List<string>();
        await foreach (var item in RecordingFile.ReadAsync(sender.FileName!, cancel: TestContext.Current.CancellationToken)) kinds.Add(item.Record!.Kind);
        Assert.Equal(["open", .. Enumerable.Repeat("iteration", 30), "close"], kinds);
    }

    [Fact]
    public async Task A_line_stands_in_the_file_while_the_run_goes_on()
    {
        await using var sender = Start();
        sender.Send(new RemarkRecord { Text = "inner solver restarted" });
        await time.Until(() => File.Exists(sender.FileName) && ReadShared(sender.FileName!).Contains("inner solver restarted", StringComparison.Ordinal));
    }

    [Fact]
    public async Task A_restart_opens_a_file_of_its_own()
    {
        await using (Start()) { }
        await using var second = Start();
        Assert.Equal("leaf.2.ndjson", Path.GetFileName(second.FileName));
    }

    [Fact]
    public async Task Settings_come_back_as_a_file_beside_it()
    {
        await using var sender = Start();
        Assert.Null(await sender.ReadSettingsAsync(TestContext.Current.CancellationToken));
        var revision = new SettingsRevision { Revision = 2, Settings = new CouplingSettings { Relaxation = 0.2 } };
        var temporary = Path.Combine(folder.FullName, "new");
        await File.WriteAllBytesAsync(temporary, JsonSerializer.SerializeToUtf8Bytes(revision, WireJson.Options), TestContext.Current.CancellationToken);
        File.Move(temporary, Path.Combine(folder.FullName, "leaf.settings.json"));
        sender.Send(new RemarkRecord { Text = "next" });
        await time.Until(() => sender.NewestRevision == 2);
        Assert.Equal(0.2, (await sender.ReadSettingsAsync(TestContext.Current.CancellationToken))!.Settings.Relaxation);
    }

    private static string ReadShared(string path)
    {
        using var reader = new StreamReader(new FileStream(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite));
        return reader.ReadToEnd();
    }
}
