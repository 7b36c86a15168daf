using System.Net.Http.Headers;
using System.Text;
using CouplingWatch.Monitoring.Journal;
using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Intake;

public class RefusingRecords(SharedWatch shared) : IClassFixture<SharedWatch>
{
    [Theory]
    [InlineData("not json at all", null)]
    [InlineData("""{"kind":"iteration","seq":2,"step":0,"iteration":1}""", "residuals")]
    [InlineData("""{"kind":"iteration","seq":2,"step":"zero","iteration":1,"residuals":{"deflection":1}}""", "step")]
    [InlineData("""{"kind":"iteration","seq":2,"step":0,"iteration":1,"residuals":{"deflection":"much"}}""", "residuals.deflection")]
    [InlineData("""{"kind":"step","seq":2,"step":0,"outcome":"perhaps"}""", "outcome")]
    [InlineData("""{"kind":"iteration","seq":2,"step":0,"iteration":1,"residuals":{"deflection":1},"vectors":{"residual":"AAAAAAAA8D8=","output":"AAAAAAAA8D8="}}""", "vectors.residual")]
    public async Task A_bad_record_is_named_and_the_good_ones_before_it_are_kept(string bad, string? member)
    {
        await using var watch = shared.Room();
        var problem = await FaultAsync(await watch.PostAsync("leaf-1", Open() + Iteration(1, 0, 0) + bad + "\n" + Iteration(3, 0, 2)), 400, "malformed");
        Assert.Equal(3, problem["line"]!.GetValue<int>());
        Assert.Equal(2, problem["next"]!.GetValue<long>());
        Assert.Equal(member, problem["member"]?.GetValue<string>());
        Assert.NotEmpty(problem["expected"]!.GetValue<string>());
        Assert.Equal(3, await watch.AcceptAsync("leaf-1", Remark(2, "one record was not as it should be")));
    }

    [Fact]
    public async Task The_length_of_vectors_is_remembered_from_one_post_to_the_next()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open());
        var three = Convert.ToBase64String(new byte[24]);
        await watch.AcceptAsync("leaf-1", Iteration(1, 0, 0, more: $",\"vectors\":{{\"residual\":\"{three}\",\"output\":\"{three}\"}}"));
        var two = Convert.ToBase64String(new byte[16]);
        var problem = await FaultAsync(await watch.PostAsync("leaf-1", Iteration(2, 0, 1, more: $",\"vectors\":{{\"residual\":\"{two}\",\"output\":\"{two}\"}}")), 400, "malformed");
        Assert.StartsWith("vectors", problem["member"]!.GetValue<string>());
    }

    [Theory]
    [InlineData("text/plain")]
    [InlineData("application/x-www-form-urlencoded")]
    [InlineData("application/cbor-seq")]
    public async Task A_body_of_another_type_is_refused(string type)
    {
        await using var watch = shared.Room();
        var content = new StringContent(Open());
        content.Headers.ContentType = new MediaTypeHeaderValue(type);
        await FaultAsync(await watch.Http.PostAsync("/api/runs/leaf-1/records", content, TestContext.Current.CancellationToken), 415, "media-type");
    }

    [Fact]
    public async Task A_body_that_says_it_is_longer_than_64_MiB_is_refused_unread()
    {
        await using var watch = shared.Room();
        var content = RecordsBody(Open());
        content.Headers.ContentLength = 64L * 1024 * 1024 + 1;
        using var request = new HttpRequestMessage(HttpMethod.Post, "/api/runs/leaf-1/records") { Content = content };
        await FaultAsync(await watch.Http.SendAsync(request, TestContext.Current.CancellationToken), 413, "too-large");
    }

    [Fact]
    public async Task A_body_that_turns_out_longer_than_64_MiB_is_refused_and_its_good_records_are_kept()
    {
        await using var watch = shared.Room();
        var pad = new string('x', 8 * 1024 * 1024 - 200);
        using var content = new ChunkedLines([Open(), .. Enumerable.Range(1, 9).Select(i => Remark(i, pad))]);
        content.Headers.ContentType = new MediaTypeHeaderValue("application/x-ndjson");
        var problem = await FaultAsync(await watch.Http.PostAsync("/api/runs/leaf-1/records", content, TestContext.Current.CancellationToken), 413, "too-large");
        var next = problem["next"]!.GetValue<long>();
        Assert.InRange(next, 8, 9);
        Assert.Equal(next + 1, await watch.AcceptAsync("leaf-1", Remark(next)));
    }

    [Theory]
    [InlineData(true, 507, "no-room")]
    [InlineData(false, 503, "journal-unavailable")]
    public async Task A_journal_in_trouble_is_said_and_the_run_goes_on_when_it_is_over(bool noRoom, int status, string name)
    {
        var journal = new MemoryJournal();
        await using var watch = await StartAsync(journal);
        await watch.AcceptAsync("leaf-1", Open());
        journal.Trouble = () => new JournalUnavailableException("the medium says no") { NoRoom = noRoom };
        using var refused = await watch.PostAsync("leaf-1", Remark(1));
        Assert.Equal(1, (await FaultAsync(refused, status, name))["next"]!.GetValue<long>());
        Assert.NotNull(refused.Headers.RetryAfter);
        await FaultAsync(await watch.Http.GetAsync("/readyz", TestContext.Current.CancellationToken), status, name);
        journal.Trouble = null;
        Assert.Equal(2, await watch.AcceptAsync("leaf-1", Remark(1)));
    }

    [Fact]
    public async Task A_run_that_sends_faster_than_it_is_written_down_is_asked_to_wait()
    {
        var journal = new HeldJournal();
        await using var watch = await StartAsync(journal);
        await watch.AcceptAsync("leaf-1", Open());
        journal.Hold();
        var waiting = Enumerable.Range(0, 40).Select(_ => watch.PostAsync("leaf-1", Remark(1))).ToList();
        await watch.UntilAsync(() => Task.FromResult(waiting.Count(w => w.IsCompleted) == 8));
        var refused = await waiting.First(w => w.IsCompleted);
        Assert.Equal("1", refused.Headers.RetryAfter?.ToString());
        await FaultAsync(refused, 429, "busy");
        journal.Release();
        var answers = await Task.WhenAll(waiting);
        Assert.Equal(8, answers.Count(a => (int)a.StatusCode == 429));
        Assert.Equal(32, answers.Count(a => (int)a.StatusCode == 200));
    }

    private sealed class ChunkedLines(IReadOnlyList<string> lines) : HttpContent
    {
        protected override async Task SerializeToStreamAsync(Stream stream, System.Net.TransportContext? context)
        {
            foreach (var line in lines) await stream.WriteAsync(Encoding.UTF8.GetBytes(line));
        }

        protected override bool TryComputeLength(out long length)
        {
            length = 0;
            return false;
        }
    }
}
