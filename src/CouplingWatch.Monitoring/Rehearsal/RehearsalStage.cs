using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>What is needed to replay a tape, or why it cannot be replayed.</summary>
internal sealed record RehearsalStage
{
    /// <summary>Complete steps with vectors that a rehearsal needs.</summary>
    public const int LeastSteps = 6;

    public const int LongestWindow = 12;

    private const int StepsLeftBefore = 4;

    /// <summary>Null when it can be replayed.</summary>
    public string? Why { get; private init; }

    public IReadOnlyList<RecordedStep> Steps { get; private init; } = [];

    public int Window { get; private init; }

    public int[]? FieldLengths { get; private init; }

    /// <summary>Tolerances of each window step by field, weighted; one combined for sketches.</summary>
    public IReadOnlyList<double[]> Targets { get; private init; } = [];

    public static RehearsalStage Of(RehearsalTape tape, RehearsalCircumstances circumstances)
    {
        if (tape.Steps.Count == 0) return Declined("no complete step has vectors: send vectors or a sketch (level 3)");
        if (tape.Steps.Count < LeastSteps) return Declined($"{tape.Steps.Count} complete steps with vectors; {LeastSteps} are needed");
        var fields = tape.Fields.Where(f => f.Role == FieldRole.Unknown).ToList();
        if (fields.Select(f => f.Group).Distinct().Count() > 1) return Declined("the fields form several groups, which are not replayed together");
        if (fields.Select(f => f.Unit).Distinct().Count() > 1 && fields.Exists(f => f.Weight is null)) return Declined("fields of different units are stacked without weights: send weights");
        var steps = tape.Steps.ToList();
        var window = Math.Min(LongestWindow, steps.Count - StepsLeftBefore);
        while (window > 0 && !EndsFinite(steps[^1])) steps.RemoveAt(steps.Count - 1);
        window = Math.Min(window, steps.Count - StepsLeftBefore);
        if (window < 1) return Declined("too few steps end with finite numbers");
        var played = steps.Skip(steps.Count - window).ToList();
        if (played.Exists(s => !EndsFinite(s))) return Declined("a step of the window ends with numbers that are not finite");
        if (played.Exists(s => s.Surrogate)) return Declined("a surrogate is in use, which the recording does not hold");
        if (played.Exists(s => !Race.SettingsDifference.AreSame(s.Settings, tape.Settings))) return Declined($"the settings changed within the last {window} steps");
        if (circumstances.Unsuitable(played[0].Step, played[^1].Step, window) is { } unsuitable) return Declined(unsuitable);
        var sketched = steps[0].Sketched;
        if (steps.Exists(s => s.Sketched != sketched)) return Declined("some steps have vectors, others sketches");
        if (Lengths(fields, steps[0].Last.Residual.Length) is not { } lengths) return Declined("the sizes of the stacked fields are not known");
        var weights = fields.Select(f => f.Weight ?? 1).ToArray();
        if (sketched && weights.Distinct().Count() > 1) return Declined("a sketch of several fields cannot be weighted afterwards");
        var targets = new List<double[]>();
        foreach (var step in played)
        {
            if (step.Targets.Any(double.IsNaN)) return Declined("the tolerance is not known: send relative and magnitudes, or targets");
            var weighted = step.Targets.Select((t, f) => t * weights[f]).ToArray();
            targets.Add(fields.Count > 1 && sketched ? [Math.Sqrt(weighted.Sum(t => t * t))] : weighted);
        }
        return new RehearsalStage
        {
            Steps = weights.All(w => w == 1) ? steps : [.. steps.Select(s => Weighted(s, weights, lengths))],
            Window = window,
            FieldLengths = fields.Count > 1 && !sketched ? lengths : null,
            Targets = targets,
        };
    }

    private static RehearsalStage Declined(string why) => new() { Why = why };

    private static bool EndsFinite(RecordedStep step) => Array.TrueForAll(step.Last.Residual, double.IsFinite) && Array.TrueForAll(step.Last.Output, double.IsFinite);

    private static int[]? Lengths(List<FieldDeclaration> fields, int length)
    {
        if (fields.Count == 1) return [length];
        var known = fields.Sum(f => f.Size ?? 0);
        var unsized = fields.Count(f => f.Size is null);
        if (unsized > 1 || (unsized == 0 && known != length) || known > length) return null;
        return [.. fields.Select(f => f.Size ?? length - known)];
    }

    private static RecordedStep Weighted(RecordedStep step, double[] weights, int[] lengths) => step with
    {
        Passes = [.. step.Passes.Select(p => new VectorPair(Weighted(p.Residual, weights, lengths), Weighted(p.Output, weights, lengths)))],
    };

    private static double[] Weighted(double[] vector, double[] weights, int[] lengths)
    {
        if (weights.Length == 1) return [.. vector.Select(v => v * weights[0])];
        var result = new double[vector.Length];
        var at = 0;
        for (var f = 0; f < lengths.Length; f++)
            for (var i = 0; i < lengths[f]; i++, at++) result[at] = weights[f] * vector[at];
        return result;
    }
}
