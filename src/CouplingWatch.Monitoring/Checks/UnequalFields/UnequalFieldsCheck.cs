using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Statistics;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Numerics.Sequences;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks.UnequalFields;

/// <summary>When one field keeps the others waiting.</summary>
public sealed record UnequalFieldsOptions
{
    public const int DefaultFirstStep = 3;
    public const int DefaultLeastSteps = 8;
    public const double DefaultLeastLead = 2.5;

    /// <summary>Earliest step counted; 0…1000.</summary>
    public int FirstStep { get; init; } = DefaultFirstStep;
    /// <summary>Converged steps needed, 1…10.</summary>
    public int LeastSteps { get; init; } = DefaultLeastSteps;
    /// <summary>Iterations between the two fields, in the median; above 0.</summary>
    public double LeastLead { get; init; } = DefaultLeastLead;

    internal void Validate(OptionFaults faults)
    {
        faults.Range("UnequalFields.FirstStep", FirstStep, 0, 1000);
        faults.Range("UnequalFields.LeastSteps", LeastSteps, 1, UnequalFieldsCheck.Steps);
        faults.Range("UnequalFields.LeastLead", LeastLead, 0.1, 1000);
    }
}

/// <summary>One stacked field arrives iterations after another, step after step: least squares hardly sees it. Level 1.</summary>
internal sealed class UnequalFieldsCheck(UnequalFieldsOptions options) : ICheck
{
    internal const int Steps = 10;

    private readonly List<Window> late = [];

    public string Id => CheckIds.UnequalFields;

    public void Restart(RunState run, RestartCause cause)
    {
        if (cause != RestartCause.TimeStep) late.Clear();
    }

    public void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
        var fields = run.Fields.Unknowns;
        if (fields.Count < 2 || !step.Converged || !step.Complete || step.Step < options.FirstStep || run.Steady) return;
        if (!run.Step.NeedsKnown) return;
        while (late.Count < fields.Count) late.Add(new Window(Steps));
        for (var f = 0; f < fields.Count; f++) late[f].Add(fields[f].Late);
        if (late[0].Count >= options.LeastSteps) Judge(fields, findings);
    }

    public void Advise(RunState run, Alert alert, List<Move> moves)
    {
        if (alert.Check != Id) return;
        if (alert.Evidence["field"]?.GetValue<string>() is not { } late || alert.Evidence["other"]?.GetValue<string>() is not { } early) return;
        moves.Add(Weigh(run, late, early));
    }

    public NotJudged? Lacks(RunState run) => run.Fields.Unknowns.Count >= 2 && run.Iterations > 0 && !run.Step.NeedsKnown
        ? new NotJudged(Id, "the tolerance of a field is unknown", "magnitudes with each iteration, or targets") : null;

    /// <summary>The weight that brings the outputs of the two fields to the same size.</summary>
    private static Move Weigh(RunState run, string late, string early)
    {
        var (slow, quick) = (run.Fields.Find(late), run.Fields.Find(early));
        double? value = slow?.Magnitude > 0 && quick?.Magnitude > 0 ? quick.Weight * quick.Magnitude / slow.Magnitude : null;
        return new Move
        {
            Setting = "weight",
            Direction = "change",
            Field = late,
            From = slow is null ? null : slow.Weight.ToString("R", System.Globalization.CultureInfo.InvariantCulture),
            Value = value,
            Text = $"scale the fields before stacking: weigh {late} {(value is { } v ? $"by {Say.Number(v)} " : "")}so that it counts like {early}",
            Caveat = "the weights of the code's least squares, not its tolerances",
        };
    }

    private void Judge(IReadOnlyList<FieldState> fields, List<Finding> findings)
    {
        Span<double> lead = stackalloc double[Steps];
        var largest = 0.0;
        int last = -1, first = -1;
        for (var a = 0; a < fields.Count; a++)
        {
            for (var b = 0; b < fields.Count; b++)
            {
                if (a == b || fields[a].Declared.Group != fields[b].Declared.Group) continue;
                var n = Math.Min(late[a].Count, late[b].Count);
                for (var i = 0; i < n; i++) lead[i] = late[a][i] - late[b][i];
                var median = Quantile.Median(lead[..n]);
                if (!(median > largest)) continue;
                largest = median;
                (last, first) = (a, b);
            }
        }
        if (largest < options.LeastLead) return;
        findings.Add(new Finding(Id, Severity.Note,
            $"{fields[last].Name} converges {Say.Number(largest)} iterations after {fields[first].Name}, step after step: stacked as they are, least squares hardly sees it.",
            new JsonObject { ["field"] = fields[last].Name, ["other"] = fields[first].Name, ["iterationsLater"] = largest, ["steps"] = late[last].Count }));
    }
}
