using System.Net;
using CouplingWatch.Client;
using CouplingWatch.Records;
using CouplingWatch.Testing.Servers;
using CouplingWatch.Wire;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Client.Tests;

public sealed class RunSenderTests : IAsyncDisposable
{
    private static readonly Uri Address = new("http://watch.test:5000/");
    private readonly FakeServer server = new();
    private readonly FakeTimeProvider time = new(new DateTimeOffset(2026, 12, 1, 8, 0, 0, TimeSpan.Zero));
    private readonly List<string> log = [];

    private static OpenRecord Open(double? beat = null) => new() { Fields = [new FieldDeclaration { Name = "deflection" }], BeatSeconds = beat };

    private static IterationRecord Iteration(int step, int k, int vector = 0) => new()
    {
        Step = step,
        Iteration = k,
        Residuals = NamedValues.Of(("deflection", Math.Pow(10, -k))),
        Vectors = vector == 0 ? null : new VectorPair(new double[vector], new double[vector]),
    };

    // The fake clock runs ahead of the work; waits that are not what a test is about must not end by it.
    private static readonly TimeSpan Never = RunSenderOptions.LongestTimeout;

    private RunSenderOptions Options => new() { Handler = server, Time = time, AnswerTimeout = Never, CloseTimeout = Never, Log = s => { lock (log) log.Add(s); } };

    private readonly List<RunSender> started = [];

    private RunSender Start(RunSenderOptions? options = null, double? beat = null)
    {
        started.Add(RunSender.Start(Address, "leaf80-1", Open(beat), options ?? Options));
        return started[^1];
    }

    /// <summary>Senders end by the fake clock, so it must go on while they do.</summary>
    public async ValueTask DisposeAsync()
    {
        server.Down = false;
        foreach (var sender in started) await time.Until(Disposed(sender));
    }

    private static async Task<bool> Disposed(RunSender sender)
    {
        await sender.DisposeAsync();
        return true;
    }

    private static void InOrder(IReadOnlyList<StreamRecord> kept) => Assert.Equal(Enumerable.Range(0, kept.Count).Select(i => (long)i), kept.Select(r => r.Seq));

    [Fact]
    public async Task Every_record_arrives_once_in_order_with_its_seq_and_time_and_the_close_comes_last()
    {
        var sender = Start();
        for (var i = 0; i < 500; i++) Assert.True(sender.Send(Iteration(i / 5, i % 5)));
        Assert.True(await time.Until(sender.CloseAsync(CloseOutcome.Finished)));
        Assert.Equal(502, server.Kept.Count);
        InOrder(server.Kept);
        Assert.Equal((sender.Instance, time.Start), (Assert.IsType<OpenRecord>(server.Kept[0]).Instance, server.Kept[0].At));
        Assert.Equal(CloseOutcome.Finished, Assert.IsType<CloseRecord>(server.Kept[^1]).Outcome);
        Assert.All(server.Queries, q => Assert.Equal($"/api/runs/leaf80-1/records?instance={sender.Instance}", q));
        Assert.False(sender.Send(Iteration(9, 9)));
    }

    [Fact]
    public async Task Records_gather_between_posts_at_least_the_linger_apart()
    {
        var sender = Start();
        await time.Until(() => server.Kept.Count == 1);
        var posts = server.Posts;
        for (var i = 0; i < 200; i++) sender.Send(Iteration(0, i));
        await time.Until(() => server.Kept.Count == 201, 0.01);
        Assert.InRange(server.Posts - posts, 1, 2);
    }

    [Fact]
    public async Task A_server_that_is_away_loses_nothing_and_the_waits_grow()
    {
        server.Down = true;
        var sender = Start();
        for (var i = 0; i < 50; i++) sender.Send(Iteration(0, i));
        await time.Until(() => server.Posts == 1);
        var first = time.GetUtcNow();
        await time.Until(() => server.Posts == 8);
        var waited = time.GetUtcNow() - first;
        // 0.25 + 0.5 + … + 16 s, each shortened by at most a quarter.
        Assert.True(waited > TimeSpan.FromSeconds(31.75 * 0.75), $"only {waited} between eight tries");
        server.Down = false;
        await time.Until(() => server.Kept.Count == 51 && sender.Pending == 0, 1);
        InOrder(server.Kept);
        Assert.Contains(log, s => s.Contains("connection refused", StringComparison.Ordinal));
        Assert.Contains("the server answers again", log);
    }

    [Theory]
    [InlineData(HttpStatusCode.InternalServerError)]
    [InlineData(HttpStatusCode.ServiceUnavailable)]
    [InlineData(HttpStatusCode.InsufficientStorage)]
    [InlineData(HttpStatusCode.Unauthorized)]
    public async Task After_a_fault_of_the_server_the_same_records_are_sent_again(HttpStatusCode status)
    {
        server.Next(status);
        var sender = Start();
        sender.Send(Iteration(0, 0));
        await time.Until(() => server.Kept.Count == 2);
        InOrder(server.Kept);
    }

    [Fact]
    public async Task Too_many_requests_are_answered_by_waiting_as_long_as_was_asked()
    {
        server.Next(HttpStatusCode.TooManyRequests, "busy", TimeSpan.FromSeconds(17));
        var sender = Start();
        await time.Until(() => server.Posts == 1);
        var asked = time.GetUtcNow();
        await time.Until(() => server.Kept.Count == 1);
        Assert.True(time.GetUtcNow() - asked >= TimeSpan.FromSeconds(16.9), $"came back after {time.GetUtcNow() - asked}");
    }

    [Fact]
    public async Task A_refused_record_is_replaced_by_a_remark_in_its_place_and_the_rest_goes_on()
    {
        server.Refuses = r => r is IterationRecord { Iteration: 7 } ? "member \"residuals\": expected something else" : null;
        var sender = Start();
        for (var i = 0; i < 20; i++) sender.Send(Iteration(0, i));
        await time.Until(() => server.Kept.Count == 21);
        InOrder(server.Kept);
        var remark = Assert.IsType<RemarkRecord>(server.Kept[8]);
        Assert.Contains("expected something else", remark.Text, StringComparison.Ordinal);
        Assert.Equal(19, server.Kept.OfType<IterationRecord>().Count());
    }

    [Fact]
    public async Task A_refusal_that_names_no_record_is_tracked_down_one_by_one()
    {
        var sender = Start(Options with { Linger = TimeSpan.Zero });
        await time.Until(() => server.Kept.Count == 1);
        server.Down = true;
        for (var i = 0; i < 6; i++) sender.Send(Iteration(0, i));
        server.Next(HttpStatusCode.BadRequest, "malformed");
        server.Next(HttpStatusCode.BadRequest, "malformed");
        server.Down = false;
        await time.Until(() => server.Kept.Count == 7);
        InOrder(server.Kept);
        Assert.IsType<RemarkRecord>(server.Kept[1]);
        Assert.Equal(5, server.Kept.OfType<IterationRecord>().Count());
    }

    [Fact]
    public async Task A_post_that_is_too_large_is_halved_and_a_record_that_is_too_large_becomes_a_remark()
    {
        server.MostBytes = 3000;
        var sender = Start(Options with { BatchBytes = 64 * 1024 });
        for (var i = 0; i < 40; i++) sender.Send(Iteration(0, i, i == 20 ? 500 : 0));
        await time.Until(() => server.Kept.Count == 41);
        InOrder(server.Kept);
        Assert.IsType<RemarkRecord>(server.Kept[21]);
    }

    [Fact]
    public async Task When_the_server_has_lost_records_the_gap_is_filled_with_skipped_records_behind_the_open_record()
    {
        var sender = Start();
        for (var i = 0; i < 9; i++) sender.Send(Iteration(0, i));
        await time.Until(() => server.Kept.Count == 10);
        server.Forget(4);
        sender.Send(Iteration(1, 0));
        await time.Until(() => server.Kept.Count == 11);
        InOrder(server.Kept);
        Assert.Equal(6, server.Kept.OfType<SkippedRecord>().Count());
        server.Forget(0);
        sender.Send(Iteration(1, 1));
        await time.Until(() => server.Kept.Count == 12);
        InOrder(server.Kept);
        Assert.IsType<OpenRecord>(server.Kept[0]);
    }

    [Fact]
    public async Task A_record_the_server_holds_with_other_content_is_let_go_of()
    {
        var sender = Start();
        await time.Until(() => server.Kept.Count == 1);
        server.Next(HttpStatusCode.Conflict, "seq-conflict", more: "\"seq\":1,\"next\":1,");
        server.Forget(1);
        sender.Send(Iteration(0, 0));
        await time.Until(() => sender.Pending == 0);
        Assert.Contains(log, s => s.Contains("was not taken", StringComparison.Ordinal));
    }

    [Theory]
    [InlineData("run-exists")]
    [InlineData("run-closed")]
    public async Task A_taken_or_closed_name_ends_sending_and_what_was_not_delivered_is_kept_in_a_file(string fault)
    {
        var folder = Directory.CreateTempSubdirectory("couplingwatch-");
        try
        {
            server.Next(HttpStatusCode.Conflict, fault);
            var sender = Start(Options with { Folder = folder.FullName });
            sender.Send(Iteration(0, 0));
            await time.Until(() => sender.GivenUp is not null);
            Assert.False(sender.Send(Iteration(0, 1)));
            Assert.False(await time.Until(sender.CloseAsync(CloseOutcome.Aborted)));
            Assert.Equal(2, File.ReadAllLines(Path.Combine(folder.FullName, "leaf80-1.unsent.ndjson")).Length);
        }
        finally
        {
            folder.Delete(true);
        }
    }

    [Fact]
    public async Task A_full_buffer_drops_iterations_says_how_many_and_never_the_verdicts_or_the_end()
    {
        server.Down = true;
        var sender = Start(Options with { BufferBytes = 20_000 });
        for (var step = 0; step < 40; step++)
        {
            for (var k = 0; k < 10; k++) sender.Send(Iteration(step, k));
            sender.Send(new StepRecord { Step = step, Outcome = StepOutcome.Converged });
        }
        Assert.True(sender.Skipped > 0);
        server.Down = false;
        Assert.True(await time.Until(sender.CloseAsync(CloseOutcome.Finished)));
        InOrder(server.Kept);
        Assert.Equal(sender.Skipped, server.Kept.OfType<SkippedRecord>().Sum(s => s.Iterations!.Value));
        Assert.Equal(400, server.Kept.OfType<IterationRecord>().Count() + sender.Skipped);
        Assert.Equal(40, server.Kept.OfType<StepRecord>().Count());
        Assert.All(server.Kept.OfType<SkippedRecord>(), s => Assert.Equal("buffer", s.Why));
        Assert.IsType<CloseRecord>(server.Kept[^1]);
    }

    [Fact]
    public async Task A_run_that_is_quiet_says_it_is_alive_and_inside_which_solver()
    {
        var sender = Start(beat: 60);
        await time.Until(() => server.Kept.Count == 1);
        sender.Enter("water");
        await time.Until(() => server.Beats.Count == 2, 1);
        Assert.Contains("\"in\":\"water\"", server.Beats[1], StringComparison.Ordinal);
        Assert.Single(server.Kept);
        sender.Send(Iteration(0, 0));
        await time.Until(() => server.Kept.Count == 2);
    }

    [Fact]
    public async Task The_newest_revision_comes_with_the_answers_and_the_settings_are_read_when_asked()
    {
        var sender = Start();
        await time.Until(() => server.Kept.Count == 1);
        Assert.Equal(0, sender.NewestRevision);
        server.Revision = 3;
        server.Settings = new SettingsRevision { Revision = 3, Settings = new CouplingSettings { FilterRule = FilterRule.OwnNorm, FilterThreshold = 1e-7 }, State = RevisionState.Published };
        sender.Send(Iteration(0, 0));
        await time.Until(() => sender.NewestRevision == 3);
        var revision = await sender.ReadSettingsAsync(TestContext.Current.CancellationToken);
        Assert.Equal((3, 1e-7, RevisionState.Published), (revision!.Revision, revision.Settings.FilterThreshold!.Value, revision.State));
    }

    [Fact]
    public async Task Closing_gives_up_after_its_time_when_the_server_stays_away()
    {
        server.Down = true;
        var sender = Start(Options with { CloseTimeout = TimeSpan.FromSeconds(15) });
        Assert.False(await time.Until(sender.CloseAsync(CloseOutcome.Finished)));
        Assert.Equal(2, sender.Pending);
    }

    [Theory]
    [InlineData("")]
    [InlineData("-leaf")]
    [InlineData("Leaf")]
    [InlineData("leaf/80")]
    public void A_name_that_is_not_allowed_is_refused_at_the_door(string run) =>
        Assert.ThrowsAny<ArgumentException>(() => RunSender.Start(Address, run, Open()));

    [Fact]
    public void Options_outside_their_ranges_are_refused_at_the_door()
    {
        Assert.Throws<ArgumentOutOfRangeException>(() => RunSender.Start(Address, "a", Open(), new RunSenderOptions { Linger = TimeSpan.FromSeconds(1) }));
        Assert.Throws<ArgumentException>(() => RunSender.Start(new Uri("watch", UriKind.Relative), "a", Open()));
    }
}
