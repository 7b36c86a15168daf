using Bunit;
using CouplingWatch.Components.Ledger;
using CouplingWatch.Components.Tests.Hand;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Ledger;

public class SecantLedgerTests : BunitContext
{
    private readonly BasisView basis = HandDetails.Starved(HandLock.Now).Basis!;

    public SecantLedgerTests() => JSInterop.Mode = JSRuntimeMode.Loose;

    private IRenderedComponent<SecantLedger> Ledger(Func<FilterRule, double, CancellationToken, Task<BasisView?>>? ask = null, BasisView? of = null, Action<TriedFilter>? propose = null) =>
        Render<SecantLedger>(p =>
        {
            p.Add(c => c.Basis, of ?? basis).Add(c => c.Ask, ask).Add(c => c.Rules, [FilterRule.OwnNorm, FilterRule.PivotRatio]).Add(c => c.Newest, 100);
            if (propose is not null) p.Add(c => c.OnPropose, propose);
        });

    [Fact]
    public void A_row_a_column_kept_or_left_out_with_the_threshold_in_force()
    {
        var ledger = Ledger();
        Assert.Equal(basis.Columns.Count, ledger.FindAll("rect").Count);
        Assert.Equal(basis.Kept, ledger.FindAll("rect.kept").Count);
        Assert.Equal("1e-2", ledger.Find("input[type=text]").GetAttribute("value"));
        Assert.Equal("-2", ledger.Find("input[type=range]").GetAttribute("value"));
        Assert.StartsWith("In force: pivot-ratio 10⁻² leaves out 40 of 45", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Typing_moves_the_rows_at_once_before_the_server_has_answered()
    {
        var never = new TaskCompletionSource<BasisView?>();
        var ledger = Ledger((_, _, _) => never.Task);
        ledger.Find("input[type=text]").Input("10⁻⁷");
        Assert.Equal(basis.Columns.Count(c => c.Share >= 1e-7), ledger.FindAll("rect.kept").Count);
        Assert.StartsWith("What if: pivot-ratio 10⁻⁷", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
        Assert.DoesNotContain("κ would be", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_answer_of_the_server_takes_the_place_of_the_guess()
    {
        var asked = new List<(FilterRule, double)>();
        var ledger = Ledger((rule, threshold, _) =>
        {
            asked.Add((rule, threshold));
            var under = HandDetails.Under(basis, rule, threshold);
            return Task.FromResult<BasisView?>(under with { Columns = [.. under.Columns.Select((c, i) => c with { Kept = i > 2 })], Kept = under.Columns.Count - 3 });
        });
        ledger.Find("input[type=text]").Input("1e-7");
        Assert.Equal([(FilterRule.PivotRatio, 1e-7)], asked);
        Assert.Equal(3, ledger.FindAll("rect.left").Count);
        Assert.Contains("κ would be 3.5 × 10⁹", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void The_slider_steps_in_tenths_of_a_decade_and_writes_the_field()
    {
        var ledger = Ledger();
        var slider = ledger.Find("input[type=range]");
        Assert.Equal("0.1", slider.GetAttribute("step"));
        Assert.Equal("-10", slider.GetAttribute("min"));
        slider.Input("-6.5");
        Assert.Equal("3.2e-7", ledger.Find("input[type=text]").GetAttribute("value"));
        Assert.Equal("-6.5", ledger.Find("input[type=range]").GetAttribute("value"));
        Assert.Contains("leaves out", ledger.Find("input[type=range]").GetAttribute("aria-valuetext"), StringComparison.Ordinal);
    }

    [Fact]
    public void Typing_moves_the_slider_and_escape_brings_everything_back()
    {
        var ledger = Ledger();
        ledger.Find("input[type=text]").Input("1e-7");
        Assert.Equal("-7", ledger.Find("input[type=range]").GetAttribute("value"));
        ledger.Find("input[type=range]").KeyDown("Escape");
        Assert.Equal("1e-2", ledger.Find("input[type=text]").GetAttribute("value"));
        Assert.Equal(basis.Kept, ledger.FindAll("rect.kept").Count);
        Assert.StartsWith("In force", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void What_is_no_threshold_moves_nothing_and_is_said()
    {
        var ledger = Ledger();
        ledger.Find("input[type=text]").Input("ten");
        Assert.Equal("true", ledger.Find("input[type=text]").GetAttribute("aria-invalid"));
        Assert.Equal(basis.Kept, ledger.FindAll("rect.kept").Count);
        Assert.Contains("such as 1e-4", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void An_older_question_is_dropped_when_a_newer_one_is_asked()
    {
        var first = new TaskCompletionSource<BasisView?>();
        CancellationToken firstToken = default;
        var count = 0;
        var ledger = Ledger((rule, threshold, cancel) =>
        {
            if (count++ > 0) return Task.FromResult<BasisView?>(HandDetails.Under(basis, rule, threshold));
            firstToken = cancel;
            return first.Task;
        });
        ledger.Find("input[type=text]").Input("1e-9");
        ledger.Find("input[type=text]").Input("1e-3");
        Assert.True(firstToken.IsCancellationRequested);
        first.SetResult(HandDetails.Under(basis, FilterRule.PivotRatio, 1e-9) with { Columns = [] });
        Assert.Equal(basis.Columns.Count(c => c.Share >= 1e-3), ledger.FindAll("rect.kept").Count);
    }

    [Fact]
    public void A_what_if_can_be_proposed_and_names_its_rule_and_threshold()
    {
        TriedFilter? proposed = null;
        var ledger = Ledger((r, t, _) => Task.FromResult<BasisView?>(HandDetails.Under(basis, r, t)), propose: t => proposed = t);
        ledger.Find("select").Change("own-norm");
        ledger.Find("input[type=text]").Input("1e-4");
        ledger.FindAll("button").Single(b => b.TextContent == "Propose it").Click();
        Assert.Equal(new TriedFilter(FilterRule.OwnNorm, 1e-4), proposed);
    }

    [Fact]
    public void While_trying_new_iterations_keep_the_what_if()
    {
        var ledger = Ledger((r, t, _) => Task.FromResult<BasisView?>(HandDetails.Under(basis, r, t)));
        ledger.Find("input[type=text]").Input("1e-7");
        ledger.Render(p => p.Add(c => c.Basis, basis with { Iteration = 20 }));
        Assert.Equal("1e-7", ledger.Find("input[type=text]").GetAttribute("value"));
        Assert.StartsWith("What if", ledger.Find(".ledger-says").TextContent, StringComparison.Ordinal);
    }

    [Fact]
    public void Only_the_newest_rows_stand_until_the_older_ones_are_asked_for()
    {
        var ledger = Render<SecantLedger>(p => p.Add(c => c.Basis, basis).Add(c => c.Newest, 24));
        Assert.Equal(24, ledger.FindAll("rect").Count);
        ledger.FindAll("button").Single(b => b.TextContent == "all 45 columns").Click();
        Assert.Equal(45, ledger.FindAll("rect").Count);
    }

    [Fact]
    public void The_room_for_rows_does_not_shrink_when_a_new_step_begins()
    {
        var ledger = Ledger();
        var before = ledger.Find(".ledger-births").GetAttribute("height");
        ledger.Render(p => p.Add(c => c.Basis, basis with { Columns = [.. basis.Columns.Skip(19)] }));
        Assert.Equal(before, ledger.Find(".ledger-births").GetAttribute("height"));
    }

    [Fact]
    public void Without_a_column_it_says_that_the_first_update_is_a_relaxation()
    {
        var ledger = Ledger(of: basis with { Columns = [], Kept = 0 });
        Assert.Contains("No column yet", ledger.Markup, StringComparison.Ordinal);
        Assert.Empty(ledger.FindAll("input"));
    }

    [Fact]
    public void Where_shares_are_not_sent_the_columns_stand_without_bars_and_without_a_threshold()
    {
        var ledger = Ledger(of: basis with { Source = "reported", Columns = [.. basis.Columns.Select(c => c with { Share = 0 })] });
        Assert.Empty(ledger.FindAll("input"));
        Assert.Equal(basis.Kept, ledger.FindAll("rect.kept").Count);
        Assert.Contains("40 of 45 columns left out, as the code reports", ledger.Markup, StringComparison.Ordinal);
    }

    [Fact]
    public void Births_are_named_by_step_and_iteration_newest_first()
    {
        var births = Ledger().FindAll(".ledger-births text").Select(t => t.TextContent).ToArray();
        Assert.Equal(["born", "step 16", "18", "17"], births[..4]);
    }

    [Fact]
    public void The_axis_reaches_further_down_only_for_very_small_thresholds()
    {
        Assert.Equal(-10, LedgerRows.Lowest(basis));
        Assert.Equal(-15, LedgerRows.Lowest(basis with { Threshold = 1e-11 }));
        Assert.Equal(0, LedgerRows.Length(0, -10));
        Assert.Equal(0.5, LedgerRows.Length(1e-5, -10), 12);
        Assert.Equal(1, LedgerRows.Length(1, -10));
    }

    [Fact]
    public void The_what_if_table_marks_what_is_in_force_and_tries_another_row()
    {
        TriedFilter? tried = null;
        var table = Render<WhatIfTable>(p => p.Add(c => c.Basis, basis).Add(c => c.OnTry, t => tried = t));
        Assert.Contains("(in force)", table.Find("tr.inforce").TextContent, StringComparison.Ordinal);
        table.FindAll("button")[1].Click();
        Assert.Equal(new TriedFilter(FilterRule.PivotRatio, 1e-7), tried);
    }
}
