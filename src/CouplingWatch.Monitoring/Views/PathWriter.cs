using CouplingWatch.Monitoring.Forecast;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Numerics.Sequences;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Views;

/// <summary>Writes the residual path of every field over the band of the earlier steps.</summary>
internal static class PathWriter
{
    /// <summary>Iterations shown at most, the newest.</summary>
    public const int PointsShown = 500;

    /// <summary>The band ends where fewer paths than this reach.</summary>
    public const int LeastPaths = 4;

    /// <summary>Values along the interface at most.</summary>
    public const int AlongValues = 60;

    /// <summary>One path a field, the governing one first.</summary>
    public static IReadOnlyList<FieldPath> Write(RunState run, IReadOnlyList<WorstResidual> worst)
    {
        List<FieldPath> paths = [];
        if (run.Traces.Count == 0) return paths;
        for (var f = 0; f < run.Fields.All.Count && f < run.Trace.FieldCount; f++) paths.Add(Path(run, f, worst));
        paths.Sort((a, b) => b.Governs.CompareTo(a.Governs));
        return paths;
    }

    private static FieldPath Path(RunState run, int f, IReadOnlyList<WorstResidual> worst)
    {
        var field = run.Fields.All[f];
        var trace = run.Trace;
        List<PathPoint> points = [];
        for (var i = Math.Max(0, trace.Count - PointsShown); i < trace.Count; i++)
        {
            var need = trace.Need(i, f);
            points.Add(new PathPoint(trace[i].Iteration, trace.Residual(i, f), double.IsNaN(need) ? null : need));
        }
        var along = Along(run, field);
        return new FieldPath
        {
            Field = field.Name,
            Unit = field.Declared.Unit,
            Governs = field == run.Fields.Governing || run.Fields.All.Count == 1,
            Target = field.Tolerance,
            Cap = run.Settings.IterationCap,
            Points = points,
            Band = Band(run.Paths, f),
            BandSteps = run.Paths.Count,
            Worst = worst.FirstOrDefault(w => w.Field == field.Name) ?? LargestOf(field.Name, along.Values),
            Along = along.Values is null ? null : Thinned(along.Values),
        };
    }

    private static IReadOnlyList<BandPoint> Band(PathBook paths, int f)
    {
        List<BandPoint> band = [];
        var values = new double[PathBook.Capacity];
        for (var k = 0; ; k++)
        {
            var n = 0;
            for (var p = 0; p < paths.Count; p++)
            {
                if (k >= paths[p].Count || f >= paths[p].FieldCount) continue;
                var need = paths[p].FieldNeed(k, f);
                if (!double.IsNaN(need)) values[n++] = need;
            }
            if (n < LeastPaths) return band;
            var sorted = values.AsSpan(0, n);
            sorted.Sort();
            band.Add(new BandPoint(k, Quantile.OfSorted(sorted, 0.1), Quantile.OfSorted(sorted, 0.9)));
        }
    }

    /// <summary>The residual of the field along the interface at the latest iteration, in its own unit; null without vectors.</summary>
    private static (double[]? Values, int _) Along(RunState run, FieldState field)
    {
        var group = run.Basis.Find(field.Declared.Group) ?? run.Basis.Find(null);
        if (group is null || group.Sketched || group.Vectors.Newest is not { Finite: true } vector || vector.Ordinal != run.Step.Ordinal) return (null, 0);
        var at = 0;
        foreach (var unknown in run.Fields.Unknowns)
        {
            if (group.Group is not null && unknown.Declared.Group != group.Group) continue;
            var size = unknown.Declared.Size ?? (run.Fields.Unknowns.Count == 1 ? vector.Residual.Length : 0);
            if (unknown == field) return size > 0 && at + size <= vector.Residual.Length ? ([.. vector.Residual.AsSpan(at, size).ToArray().Select(v => v / field.Weight)], size) : (null, 0);
            if (size == 0) return (null, 0);
            at += size;
        }
        return (null, 0);
    }

    private static WorstResidual? LargestOf(string field, double[]? values)
    {
        if (values is null) return null;
        var at = 0;
        for (var i = 1; i < values.Length; i++)
            if (Math.Abs(values[i]) > Math.Abs(values[at])) at = i;
        return new WorstResidual(field, at, values[at]);
    }

    private static double[] Thinned(double[] values)
    {
        var bars = Math.Min(AlongValues, values.Length);
        var thinned = new double[bars];
        for (var i = 0; i < values.Length; i++)
        {
            var bar = (int)((long)i * bars / values.Length);
            thinned[bar] = Math.Max(thinned[bar], Math.Abs(values[i]));
        }
        return thinned;
    }
}
