using static CouplingWatch.Server.Tests.RunLines;
using static CouplingWatch.Server.Tests.WatchUnderTest;

namespace CouplingWatch.Server.Tests.Intake;

public class PostingRecords(SharedWatch shared) : IClassFixture<SharedWatch>
{
    [Fact]
    public async Task Records_are_answered_with_the_seq_expected_next_and_the_newest_revision()
    {
        await using var watch = shared.Room();
        using var answer = await watch.PostAsync("leaf-1", Open() + Iteration(1, 0, 0) + Iteration(2, 0, 1), Instance);
        Assert.Equal(200, (int)answer.StatusCode);
        Assert.Equal("""{"next":3,"revision":0}""", await answer.Content.ReadAsStringAsync(TestContext.Current.CancellationToken));
    }

    [Fact]
    public async Task Records_are_in_the_journal_when_they_are_answered()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open() + Remark(1));
        Assert.NotNull(await watch.Journal.FindAsync(watch.NameOf("leaf-1"), 1, TestContext.Current.CancellationToken));
    }

    [Fact]
    public async Task A_post_sent_again_changes_nothing()
    {
        await using var watch = shared.Room();
        var lines = Joined(Steps(3));
        var next = await watch.AcceptAsync("leaf-1", lines, Instance);
        var before = (await watch.GetAsync("/api/runs/leaf-1")).ToJsonString();
        Assert.Equal(next, await watch.AcceptAsync("leaf-1", lines, Instance));
        Assert.Equal(next, await watch.AcceptAsync("leaf-1", Iteration(3, 0, 2), Instance));
        Assert.Equal(before, (await watch.GetAsync("/api/runs/leaf-1")).ToJsonString());
    }

    [Fact]
    public async Task A_post_that_overlaps_what_is_kept_goes_on_behind_it()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open() + Remark(1) + Remark(2));
        Assert.Equal(5, await watch.AcceptAsync("leaf-1", Remark(1) + Remark(2) + Remark(3) + Remark(4)));
    }

    [Fact]
    public async Task A_line_may_end_with_a_carriage_return_and_the_last_without_any_end()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open() + Remark(1));
        Assert.Equal(3, await watch.AcceptAsync("leaf-1", Remark(1).Replace("\n", "\r\n") + Remark(2).TrimEnd()));
    }

    [Fact]
    public async Task A_gap_is_refused_with_the_seq_expected_and_what_came_before_is_kept()
    {
        await using var watch = shared.Room();
        var problem = await FaultAsync(await watch.PostAsync("leaf-1", Open() + Remark(1) + Remark(4)), 409, "seq-gap");
        Assert.Equal(2, problem["next"]!.GetValue<long>());
        Assert.Equal(3, problem["line"]!.GetValue<int>());
        Assert.Equal(3, await watch.AcceptAsync("leaf-1", Remark(2)));
    }

    [Fact]
    public async Task Another_record_under_a_kept_seq_is_refused()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open() + Remark(1, "one"));
        var problem = await FaultAsync(await watch.PostAsync("leaf-1", Remark(1, "other")), 409, "seq-conflict");
        Assert.Equal(2, problem["next"]!.GetValue<long>());
    }

    [Fact]
    public async Task Two_records_of_one_post_under_one_seq_conflict_and_the_first_is_kept()
    {
        await using var watch = shared.Room();
        var problem = await FaultAsync(await watch.PostAsync("leaf-1", Open() + Remark(1, "one") + Remark(1, "other")), 409, "seq-conflict");
        Assert.Equal(2, problem["next"]!.GetValue<long>());
        Assert.Equal(2, await watch.AcceptAsync("leaf-1", Remark(1, "one") + Remark(1, "one")));
    }

    [Theory]
    [InlineData("zzz", false)]
    [InlineData("zzz", true)]
    public async Task Another_instance_under_the_same_name_is_refused(string other, bool byOpen)
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open(), Instance);
        await FaultAsync(byOpen ? await watch.PostAsync("leaf-1", Open(other)) : await watch.PostAsync("leaf-1", Remark(1), other), 409, "run-exists");
    }

    [Fact]
    public async Task Nothing_follows_a_close_but_a_resend()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open() + Close(1));
        Assert.Equal(2, await watch.AcceptAsync("leaf-1", Close(1)));
        await FaultAsync(await watch.PostAsync("leaf-1", Remark(2)), 409, "run-closed");
    }

    [Fact]
    public async Task A_run_begins_with_open_at_seq_0()
    {
        await using var watch = await StartAsync();
        Assert.Equal(0, (await FaultAsync(await watch.PostAsync("leaf-1", Remark(7)), 409, "seq-gap"))["next"]!.GetValue<long>());
        Assert.Equal("kind", (await FaultAsync(await watch.PostAsync("leaf-1", Remark(0)), 400, "malformed"))["member"]!.GetValue<string>());
        Assert.Empty((await watch.GetAsync("/api/runs"))["items"]!.AsArray());
    }

    [Fact]
    public async Task Open_stands_only_once()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open());
        await FaultAsync(await watch.PostAsync("leaf-1", Open().Replace("\"seq\":0", "\"seq\":1")), 400, "malformed");
    }

    [Theory]
    [InlineData("Leaf")]
    [InlineData("-leaf")]
    [InlineData("leaf%20one")]
    [InlineData("aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa")]
    public async Task A_name_that_is_not_allowed_is_refused(string run)
    {
        await using var watch = shared.Room();
        await FaultAsync(await watch.PostAsync(run, Open()), 400, "bad-run-name");
    }

    [Fact]
    public async Task A_beat_is_taken_and_not_kept()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open());
        Assert.Equal(1, await watch.AcceptAsync("leaf-1", """{"kind":"beat","in":"water","insideSeconds":12}""" + "\n"));
        Assert.Equal(2, await watch.AcceptAsync("leaf-1", Remark(1)));
    }

    [Fact]
    public async Task Bare_tokens_for_no_number_are_taken_for_what_they_mean()
    {
        await using var watch = shared.Room();
        await watch.AcceptAsync("leaf-1", Open() + Iteration(1, 0, 0).Replace("0.01}", "NaN}") + Iteration(2, 0, 1).Replace("0.0001}", "-Infinity}"));
        Assert.NotEmpty((await watch.GetAsync("/api/alerts?run=leaf-1"))["items"]!.AsArray());
    }
}
