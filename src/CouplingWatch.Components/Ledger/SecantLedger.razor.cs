using System.Globalization;
using CouplingWatch.Components.Formatting;
using CouplingWatch.Records;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Components;
using Microsoft.AspNetCore.Components.Web;

namespace CouplingWatch.Components.Ledger;

/// <summary>A filter tried on the ledger: nothing is published by it.</summary>
public sealed record TriedFilter(FilterRule Rule, double Threshold);

/// <summary>The secant ledger with its threshold as a what-if: rows move at once by their shares, then as the server answers.</summary>
public sealed partial class SecantLedger : IDisposable
{
    private const int RowHeight = 13;
    private CancellationTokenSource? asking;
    private IReadOnlyList<LedgerRow> rows = [];
    private BasisView? answer, askedFor;
    private FilterRule rule;
    private double threshold;
    private string slider = "";
    private string typed = "";
    private bool tries, wrong, all, measured;
    private int drawn, room;

    /// <summary>The basis in force.</summary>
    [Parameter, EditorRequired] public BasisView Basis { get; set; } = default!;

    /// <summary>Answers a what-if exactly; null where nobody can.</summary>
    [Parameter] public Func<FilterRule, double, CancellationToken, Task<BasisView?>>? Ask { get; set; }

    /// <summary>Rules that can be tried.</summary>
    [Parameter] public IReadOnlyList<FilterRule> Rules { get; set; } = [];

    [Parameter] public EventCallback<TriedFilter> OnPropose { get; set; }

    /// <summary>Told of every filter tried, and null when it is back in force.</summary>
    [Parameter] public EventCallback<TriedFilter?> OnTry { get; set; }

    /// <summary>Rows shown before "older" is asked for.</summary>
    [Parameter] public int Newest { get; set; } = 40;

    [Parameter] public string Id { get; set; } = "ledger";

    private BasisView Shown => Tries && answer is { } a && a.Step == Basis.Step && a.Rule == rule ? a : Basis;

    private bool Tries => tries;

    private int Lowest => LedgerRows.Lowest(Basis, tries ? threshold : null);

    private int LeftOut => rows.Count(r => !r.Kept);

    private IEnumerable<int> Powers => Enumerable.Range(0, Lowest == -10 ? 6 : 4).Select(i => -i * (Lowest == -10 ? 2 : 5));

    private int Height => 20 + room * RowHeight + 16;

    private string InForceAt => Place(Basis.Threshold <= 0 ? Lowest : Math.Log10(Basis.Threshold));

    private string InWords => $"{rows.Count - LeftOut} of {Numbers.Count(rows.Count, "column")} kept under {LedgerRows.Named(Shown.Rule)} at {Numbers.Power(threshold)}";

    private string Outcome
    {
        get
        {
            if (wrong) return "a number from 0 to below 1, such as 1e-4";
            var left = $"leaves out {LeftOut} of {Numbers.Count(rows.Count, "column")}";
            if (!tries) return $"In force: {LedgerRows.Named(Basis.Rule)} {Numbers.Power(Basis.Threshold)} {left}. Drag the line or type to try another; nothing is published by it.";
            var exact = Shown.Threshold.Equals(threshold) && Shown.Rule == rule ? $"; κ would be {Numbers.Power(Shown.ConditionUnit)}, left over at most {Numbers.Sig(Shown.Uncovered, 2)}" : "";
            return $"What if: {LedgerRows.Named(rule)} {Numbers.Power(threshold)} {left}{exact}. In force stays {LedgerRows.Named(Basis.Rule)} {Numbers.Power(Basis.Threshold)}.";
        }
    }

    protected override async Task OnParametersSetAsync()
    {
        if (!tries) Follow();
        Lay();
        if (tries && !ReferenceEquals(askedFor, Basis)) await AskAsync();
    }

    public void Dispose()
    {
        asking?.Cancel();
        asking?.Dispose();
    }

    /// <summary>Tries a filter, as a click on the what-if table does.</summary>
    public Task TryAsync(FilterRule other, double value) => Set(other, value, fromText: false, fromSlider: false);

    private void Older()
    {
        all = !all;
        Lay();
    }

    private static int Top(int row) => 20 + row * RowHeight;

    private string Place(double power) => Numbers.Plain(100 * (1 - power / Lowest), 2) + "%";

    private static string Says(LedgerRow row) =>
        $"born in step {row.Column.Birth.Step}, iteration {row.Column.Birth.Iteration}: {Numbers.Power(row.Column.Share, 3)}, {(row.Kept ? "kept" : "left out")}";

    private Task Slide(ChangeEventArgs e) =>
        double.TryParse(e.Value as string, NumberStyles.Float, CultureInfo.InvariantCulture, out var decades)
            ? SlideTo((string)e.Value!, decades)
            : Task.CompletedTask;

    private Task SlideTo(string text, double decades)
    {
        slider = text;
        return Set(rule, decades <= Lowest ? ThresholdText.At(Lowest) : ThresholdText.At(Math.Min(decades, -0.05)), fromText: false, fromSlider: true);
    }

    private Task Key(KeyboardEventArgs e) => e.Key == "Escape" && tries ? Back() : Task.CompletedTask;

    private Task Type(ChangeEventArgs e)
    {
        typed = e.Value as string ?? "";
        if (ThresholdText.Parse(typed) is { } value)
        {
            wrong = false;
            return Set(rule, value, fromText: true, fromSlider: false);
        }
        wrong = true;
        return Task.CompletedTask;
    }

    private Task Choose(ChangeEventArgs e) => Set(Rules.First(r => LedgerRows.Named(r) == e.Value as string), threshold, fromText: false, fromSlider: false);

    private Task Back()
    {
        asking?.Cancel();
        tries = wrong = false;
        answer = null;
        Follow();
        Lay();
        return OnTry.InvokeAsync(null);
    }

    private async Task Set(FilterRule other, double value, bool fromText, bool fromSlider)
    {
        tries = true;
        wrong = false;
        (rule, threshold) = (other, value);
        if (!fromText) typed = ThresholdText.Typed(value);
        if (!fromSlider) slider = Decades(value);
        Lay();
        await OnTry.InvokeAsync(new TriedFilter(rule, threshold));
        await AskAsync();
    }

    private async Task AskAsync()
    {
        if (Ask is null) return;
        asking?.Cancel();
        asking?.Dispose();
        asking = new CancellationTokenSource();
        var mine = asking.Token;
        askedFor = Basis;
        try
        {
            var came = await Ask(rule, threshold, mine);
            if (mine.IsCancellationRequested || came is null) return;
            answer = came;
            Lay();
        }
        catch (OperationCanceledException)
        {
            // A newer question took its place.
        }
    }

    private void Follow()
    {
        (rule, threshold) = (Basis.Rule, Basis.Threshold);
        typed = ThresholdText.Typed(threshold);
        slider = Decades(threshold);
    }

    private string Decades(double value) => ThresholdText.Decades(value, Lowest).ToString("0.#", CultureInfo.InvariantCulture);

    /// <summary>Rows and the room kept for them: it grows in eights and never shrinks while the page is open, so nothing below jumps.</summary>
    private void Lay()
    {
        measured = Basis.Columns.Any(c => c.Share > 0);
        rows = LedgerRows.Of(Basis, Shown, threshold, Lowest);
        drawn = all ? rows.Count : Math.Min(rows.Count, Newest);
        room = Math.Max(Math.Min(room, all ? int.MaxValue : Newest), (drawn + 7) / 8 * 8);
    }
}
