using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Advising;

/// <summary>What a healthy run could do to be clearly cheaper. Never an alert.</summary>
internal static class StandingAdvice
{
    public const int LeastSteps = 5;
    public const double DearRelaxation = 8;
    public const double DearWithoutHistory = 6;

    public static void Propose(RunState run, List<Move> moves)
    {
        if (run.Steady || run.ConvergedCounts.Count < LeastSteps) return;
        var median = Robust.Median(run.ConvergedCounts, RunState.LatestSteps);
        if (run.Settings.Method is CouplingMethod.Fixed or CouplingMethod.Aitken && median >= DearRelaxation && Moves.ToQuasiNewton(run) is { } method)
            moves.Add(With(method, median));
        if (run.Settings.Method == CouplingMethod.IqnIls && run.Settings.HistorySteps == 0 && median >= DearWithoutHistory && Moves.HistoryUp(run) is { } history)
            moves.Add(With(history, median));
    }

    private static Move With(Move move, double median)
    {
        var expected = (JsonObject)move.Expected.DeepClone();
        expected["iterationsNow"] = median;
        return move with { Expected = expected, Text = $"{move.Text}: steps take {Say.Number(median)} iterations now" };
    }
}
