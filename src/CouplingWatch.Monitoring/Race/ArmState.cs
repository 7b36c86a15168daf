using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Race;

/// <summary>An arm in the running race: its settings, and the score of every round it ran.</summary>
internal sealed class ArmState(int index, CouplingSettings settings, string name, string origin)
{
    private readonly SortedDictionary<int, double> scores = [];

    public int Index => index;

    public CouplingSettings Settings => settings;

    public string Name => name;

    public string Origin => origin;

    public bool In { get; private set; } = true;

    public string? OutWhy { get; private set; }

    public int? OutRound { get; private set; }

    /// <summary>Left only because others ranked before it.</summary>
    public bool RunnerUp { get; private set; }

    /// <summary>Iterations saved against arm 0 so far; below 0 when it cost some.</summary>
    public double Credit { get; set; }

    public int StepsRun { get; set; }

    public int CappedSteps { get; set; }

    public IReadOnlyDictionary<int, double> Scores => scores;

    public double? Mean => scores.Count == 0 ? null : scores.Values.Average();

    public void Score(int round, double score) => scores[round] = score;

    public void Leave(int round, string why, bool runnerUp = false)
    {
        RunnerUp = runnerUp;
        In = false;
        OutWhy = why;
        OutRound = round;
    }

    /// <summary>Differences to <paramref name="other"/> over the rounds both ran, oldest first.</summary>
    public double[] DifferencesTo(ArmState other) => [.. scores.Where(s => other.scores.ContainsKey(s.Key)).Select(s => s.Value - other.scores[s.Key])];

    /// <summary>Mean over the rounds <paramref name="other"/> ran too; NaN without one.</summary>
    public double MeanBeside(ArmState other)
    {
        var common = scores.Where(s => other.scores.ContainsKey(s.Key)).Select(s => s.Value).ToArray();
        return common.Length == 0 ? double.NaN : common.Average();
    }
}
