using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Monitoring.Tests.Recordings;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Tests.Rehearsal;

/// <summary>
/// Replayed iterations a step on the labelled recordings. The figures were found by an independent implementation of the same rules in
/// another language; a count flips when a residual just meets its tolerance, so ±0.35 is fine. They were found when a last step cut off
/// by the end of the recording still counted, so here it is closed as if it had converged; else such a step is not played.
/// </summary>
public sealed class RecordedFiguresTests(ITestOutputHelper output)
{
    private const double Flip = 0.35;

    [Theory]
    [InlineData("c01", 3.500, 3.583, 3.500)]
    [InlineData("c02", 5.083, 5.333, 5.083)]
    [InlineData("c03", 11, 11, 10.750)]
    [InlineData("c28", 24.250, 23.750, 21.250)]
    public void The_settings_in_use_are_replayed(string recording, double own, double strict, double recorded)
    {
        var rehearsal = Tapes.Of(recording);
        output.WriteLine($"{recording}: own {rehearsal.InUse!.Own:0.000} strict {rehearsal.InUse.Strict:0.000} recorded {rehearsal.Calibration.Recorded:0.000}");
        Assert.Equal(recorded, rehearsal.Calibration.Recorded!.Value, 3);
        Assert.InRange(rehearsal.InUse.Own, own - Flip, own + Flip);
        Assert.InRange(rehearsal.InUse.Strict, strict - Flip, strict + Flip);
        Assert.True(rehearsal.Calibration.Trusted);
    }

    [Theory]
    [InlineData("c01", null, 0, null, 9.000, 9.000)]
    [InlineData("c01", null, null, 0.1, 4.417, 4.500)]
    [InlineData("c02", null, 4, null, 6.500, 6.583)]
    [InlineData("c02", null, 0, null, 11, 11)]
    [InlineData("c02", null, 4, 1e-2, 13.333, 13.333)]
    [InlineData("c03", null, 4, null, 4.583, 5.417)]
    [InlineData("c03", null, 8, null, 4.250, 4.917)]
    [InlineData("c28", CouplingMethod.IqnIls, 0, null, 9, 9)]
    [InlineData("c28", CouplingMethod.IqnIls, 4, 1e-4, 4.500, 5.250)]
    public void Candidates_are_replayed(string recording, CouplingMethod? method, int? history, double? threshold, double own, double strict)
    {
        var rehearsal = Tapes.Of(recording);
        var candidate = Tapes.Settings(recording).With(new CouplingSettings { Method = method, HistorySteps = history, FilterThreshold = threshold });
        var scored = rehearsal.Score(candidate, TestContext.Current.CancellationToken);
        output.WriteLine($"{recording}: own {scored.Own:0.000} strict {scored.Strict:0.000}");
        Assert.InRange(scored.Own, own - Flip, own + Flip);
        Assert.InRange(scored.Strict, strict - Flip, strict + Flip);
        Assert.Equal(Math.Sqrt(scored.Own * scored.Strict), scored.Mean, 12);
    }
}

/// <summary>Prepared rehearsals of recordings.</summary>
internal static class Tapes
{
    private static readonly System.Collections.Concurrent.ConcurrentDictionary<string, SettingsRehearsal> Prepared = new();

    public static RehearsalTape Tape(string recording, int? until = null, bool closeLast = false)
    {
        var last = 0;
        var tape = new RehearsalTape();
        foreach (var record in Recording.Of(recording).Records)
        {
            if (record is IterationRecord i)
            {
                if (i.Step > until) break;
                last = i.Step;
            }
            tape.Observe(record);
        }
        if (closeLast) tape.Observe(new StepRecord { Step = last, Outcome = StepOutcome.Converged });
        return tape;
    }

    public static CouplingSettings Settings(string recording) => Tape(recording).Settings;

    public static SettingsRehearsal Of(string recording) => Prepared.GetOrAdd(recording, r => SettingsRehearsal.Prepare(Tape(r, closeLast: true)));
}
