using System.Text.Json.Nodes;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Components.Tests.Hand;

/// <summary>Run pages by hand, one in each state a panel can be in. Names, people and figures are invented.</summary>
public static class HandDetails
{
    /// <summary>A starved leaf: pivot-ratio 1e-2, advice to lower the threshold, adjustable in flight.</summary>
    public static RunDetail Starved(DateTimeOffset now)
    {
        var summary = HandLock.Losing(now);
        var basis = Basis(16, 19, FilterRule.PivotRatio, 1e-2, [4, 14, 4, 4], (age, i) => Math.Pow(10, i == 0 ? -0.1 * age : -2.4 - 0.12 * age - 0.13 * i), advised: 1e-7);
        return new RunDetail
        {
            Summary = summary with
            {
                StepsPlanned = 120,
                Iteration = 19,
                Next = new Advice
                {
                    Id = "a-threshold",
                    Setting = "filterThreshold",
                    Move = "down",
                    Value = 1e-7,
                    From = "1e-2",
                    Because = [summary.OpenAlerts[0].Id],
                    Adjustable = true,
                    Text = "lower the threshold 10⁻² → 10⁻⁷, ten times the declared noise",
                    Caveat = "Proven wrong if the next step still leaves its newest columns out.",
                    Expected = new JsonObject(),
                },
            },
            RestsOn = "16 complete steps (one of them given up), norms, seconds and full vectors (level 3), and the declared noise of water, 10⁻⁸",
            NotJudged = [new("hang", "no beats are sent", "beat records"), new("surrogate balance", "the run uses none", "")],
            Settings = Settings(FilterRule.PivotRatio, 1e-2),
            Adjustable = Declared,
            Revisions = [new SettingsRevision { Revision = 0, Settings = Settings(FilterRule.PivotRatio, 1e-2), By = "the run", At = now.AddHours(-20), State = RevisionState.Applied, FromStep = 0 }],
            Solvers = [new("water", 1e-8), new("leaf")],
            Fields = [new FieldDeclaration { Name = "deflection", Unit = "m", Size = 60, Weight = 1, Relative = 1e-5 }],
            Time = 0.085,
            TimeStep = 0.005,
            EndTime = 0.6,
            Paths = [Path("deflection", "m", true, 1.31e-6, 40, [5.5, 3.1, 2.95, 2.9, 2.85, 2.8, 2.76, 2.71, 2.67, 2.62, 2.58, 2.53, 2.49, 2.44, 2.4, 2.35, 2.31, 2.26, 2.22, 2.17], 16, 15) with { Along = Along(60, 10), Worst = new("deflection", 10, 4.0e-7) }],
            Rate = new(0.902, 0.902, 0.903),
            StepForecast = new(48, 46, 51, "rate", 19, 2.17),
            Governing = [.. Enumerable.Range(0, 16).Select(s => new GoverningStep(s, "deflection", 0))],
            Basis = basis,
            Condition = Condition(10, 16, k => 2.9 + 0.3 * Math.Sin(k * 0.7)),
            Split = [.. Enumerable.Range(0, 20).Select(i => new SplitBar(i, 0.62, 0.22, 0, 0.16, 0.334, i < 19 ? 0.902 : null, i < 19 ? "none-made" : "open"))],
            Spectrum = Spectrum([-9.15, -3.1, -1.7, -1.0, -0.6, -0.3, -0.2, -0.12, -0.08, -0.05, -0.03, -0.01, -0.004, -0.0013], 0.1),
            Cost = Cost(spent: 38.2, lost: 6.1),
            Log = Log(now),
        };
    }

    /// <summary>Two fields on course, dearer than need be; nothing adjustable.</summary>
    public static RunDetail TwoFields(DateTimeOffset now)
    {
        var summary = HandLock.Dearer(now) with { Run = "gate-wall-2", Title = "leaf with warm wall", Solvers = ["water", "rest"], Step = 17, Iteration = 5, StepsPlanned = 90, StepsComplete = 17 };
        return Starved(now) with
        {
            Summary = summary,
            RestsOn = "17 complete steps, norms, seconds and full vectors (level 3)",
            Adjustable = new(),
            Settings = Settings(FilterRule.OwnNorm, 1e-4),
            NotJudged = [new("surrogate balance", "the run uses none", ""), new("hang", "no beats are sent", "beat records")],
            Fields = [new FieldDeclaration { Name = "deflection", Unit = "km", Size = 60, Weight = 1 }, new FieldDeclaration { Name = "wall temperature", Unit = "K", Size = 30, Weight = 1 }],
            Paths =
            [
                Path("wall temperature", "K", false, 2.58e-7, 40, [6.1, 2.1, 1.9, 0.7, 0.5, 0.55], 17, 11) with { Along = Along(30, 17), Worst = new("wall temperature", 17, -8.1e-7) },
                Path("deflection", "km", true, 1.5e-11, 40, [5.6, 5.1, 4.4, 4.2, 3.7, 3.6], 17, 11) with { Along = Along(60, 44), Worst = new("deflection", 44, -1.3e-9) },
            ],
            Rate = new(0.172, 0.0096, 0.83),
            StepForecast = new(4, 3, 5, "paths", 5, 3.6),
            Governing = [.. Enumerable.Range(0, 17).Select(s => new GoverningStep(s, "deflection", 2 + (s * 7 % 4)))],
            Basis = Basis(17, 5, FilterRule.OwnNorm, 1e-4, [5, 10, 10, 6, 8], (age, i) => age > 2 && i == 0 ? Math.Pow(10, -5 - age * 0.2) : Math.Pow(10, -0.05 - 0.25 * ((i * 3) % 5) * (age > 0 ? 1 : 0.1)), advised: 1e-6),
            Condition = Condition(8, 17, k => 5.8 + Math.Sin(k * 0.9)),
            Split =
            [
                new(0, 0, 0.9999, 0, 0.0001, 6.7e-6, 7.9e-5, "kept"), new(1, 0, 0.993, 0, 0.007, 0.035, 0.765, "broken"), new(2, 0.4, 0.599, 0, 0.001, 0.023, 0.039, "kept"),
                new(3, 0.37, 0.61, 0, 0.02, 0.136, 0.622, "kept"), new(4, 0.58, 0.38, 0, 0.04, 0.198, 1.44, "broken"), new(5, 0.9995, 0.0004, 0, 0.0001, 0.003, null, "open"),
            ],
            Spectrum = Spectrum([.. Enumerable.Range(0, 30).Select(i => -26.8 - i * 0.0067), -9.1, -3, -1.7, -1, -0.6, -0.3, -0.2, -0.1, -0.05, -0.01], 0.1) with { RelaxationLimit = 0.0713, RelaxationBest = 0.0688 },
            Log = [.. Log(now).Where(l => l.What != "applied" && l.What != "settings")],
        };
    }

    /// <summary>A first step that diverges under fixed relaxation: no band, no basis, nothing complete.</summary>
    public static RunDetail Diverging(DateTimeOffset now) => Starved(now) with
    {
        Summary = HandLock.Diverging(now),
        RestsOn = "no complete step; 13 iterations of step 0",
        Settings = new() { Method = CouplingMethod.Fixed, Relaxation = 0.30, IterationCap = 40 },
        Paths = [new FieldPath { Field = "deflection", Unit = "m", Governs = true, Target = 1e-8, Cap = 40, Points = [.. Enumerable.Range(0, 13).Select(i => new PathPoint(i, 4.2e-4 * Math.Pow(2.05, Math.Max(0, i - 1)), 4.7 - 0.02 * i))] }],
        Rate = new(2.05, 2.04, 2.06),
        StepForecast = null,
        Governing = [],
        Basis = null,
        Condition = [],
        Split = [],
        Spectrum = Spectrum([-9.15, -3.1, -1.7, -1.0, -0.6], 0.30),
        Cost = Cost(1.2, null),
        Log = [.. Log(now).Skip(5)],
    };

    /// <summary>A run whose fields have different units without weights: the basis is not judged; no tolerance either.</summary>
    public static RunDetail NotJudged(DateTimeOffset now) => TwoFields(now) with
    {
        Summary = HandLock.NotJudged(now),
        Basis = null,
        Condition = [],
        Split = [],
        Spectrum = null,
        Cost = null,
        StepForecast = null,
        NotJudged = [new("starved", "two fields of different units came without weights", "fields[].weight"), new("spectrum", "two fields of different units came without weights", "fields[].weight"), new("cost", "no seconds are sent", "seconds")],
        Paths = [.. TwoFields(now).Paths.Select(p => p with { Target = null, Band = [], BandSteps = 0, Along = null, Worst = null, Points = [.. p.Points.Select(q => q with { Need = null })] })],
    };

    /// <summary>A run that has sent its first record only.</summary>
    public static RunDetail JustOpened(DateTimeOffset now) => new()
    {
        Summary = HandLock.Learning(now) with { Step = -1, Iteration = -1, StepsComplete = 0, Strip = [], Passes = [], IterationsPerStep = null, Forecast = null, Verdict = new("learning", "Learning", ": no iteration has come yet.") },
        RestsOn = "the first record only",
        Settings = Settings(FilterRule.OwnNorm, 1e-4),
        Adjustable = Declared,
    };

    public static readonly AdjustableSettings Declared = new()
    {
        Ranges = new Dictionary<string, NumberRange> { ["relaxation"] = new(0.01, 1), ["filterThreshold"] = new(1e-12, 0.1), ["historySteps"] = new(0, 40), ["iterationCap"] = new(10, 80) },
        Choices = new Dictionary<string, IReadOnlyList<string>> { ["filterRule"] = ["own-norm", "pivot-ratio"] },
        Commands = ["dropHistory", "stop"],
    };

    public static CouplingSettings Settings(FilterRule rule, double threshold) => new()
    {
        Method = CouplingMethod.IqnIls,
        Relaxation = 0.1,
        HistorySteps = 4,
        FilterRule = rule,
        FilterThreshold = threshold,
        IterationCap = 40,
        PredictorOrder = 1,
    };

    /// <summary>A revision in a state, after revision 0.</summary>
    public static RunDetail With(this RunDetail run, SettingsRevision revision) =>
        run with { Summary = run.Summary with { Revision = revision.Revision }, Revisions = [.. run.Revisions, revision] };

    /// <summary>A basis whose shares come from (age of the step, place in it, newest 0), judged by its threshold as they stand.</summary>
    public static BasisView Basis(int step, int iteration, FilterRule rule, double threshold, int[] columns, Func<int, int, double> share, double? advised = null)
    {
        var all = new[] { iteration }.Concat(columns.Skip(columns.Length > 0 && columns[0] == iteration ? 1 : 0)).ToArray();
        var list = all.SelectMany((n, age) => Enumerable.Range(0, n).Select(i => (Birth: new ColumnBirth(step - age, n - 1 - i), age, Share: share(age, i))))
            .Select(c => new BasisColumn(c.Birth, c.age, c.Share, c.Share >= threshold)).ToArray();
        return new BasisView
        {
            Step = step,
            Iteration = iteration,
            Rule = rule,
            Threshold = threshold,
            Source = "vectors",
            Columns = list,
            Kept = list.Count(c => c.Kept),
            Condition = 4.1e6,
            ConditionUnit = 1184,
            CoefficientError = 1.2e-5,
            Uncovered = 0.334,
            AdvisedThreshold = advised,
            DeclaredNoise = 1e-8,
            WhatIf =
            [
                new(rule, threshold, true, list.Count(c => c.Kept), 1184, 0.334), new(FilterRule.PivotRatio, 1e-4, false, 10, 3.8e5, 4.5e-10), new(FilterRule.PivotRatio, 1e-7, false, 19, 3.5e9, 6.3e-12),
                new(FilterRule.OwnNorm, 1e-4, rule == FilterRule.OwnNorm, 15, 8.9e7, 3.2e-11), new(FilterRule.OwnNorm, 1e-6, false, 23, 9e11, 5.9e-12),
            ],
        };
    }

    /// <summary>The same columns under another threshold, kept by their shares.</summary>
    public static BasisView Under(BasisView basis, FilterRule rule, double threshold)
    {
        var columns = basis.Columns.Select(c => c with { Kept = c.Share >= threshold }).ToArray();
        return basis with { Rule = rule, Threshold = threshold, Columns = columns, Kept = columns.Count(c => c.Kept), ConditionUnit = 3.5e9, Uncovered = 6.3e-12 };
    }

    private static FieldPath Path(string field, string unit, bool governs, double target, int cap, double[] needs, int bandSteps, int bandTo) => new()
    {
        Field = field,
        Unit = unit,
        Governs = governs,
        Target = target,
        Cap = cap,
        BandSteps = bandSteps,
        Points = [.. needs.Select((y, i) => new PathPoint(i, target * Math.Pow(10, y), y))],
        Band = [.. Enumerable.Range(0, bandTo).Select(i => new BandPoint(i, 3 - 0.75 * i, 6.9 - 0.45 * i))],
    };

    private static double[] Along(int bars, int worst) => [.. Enumerable.Range(0, bars).Select(i => 2e-7 * (1.2 + Math.Sin(i * 0.21)) * (i == worst ? 2 : 1))];

    private static IReadOnlyList<ConditionPoint> Condition(int from, int to, Func<int, double> log) =>
        [.. Enumerable.Range(0, (to - from + 1) * 6).Select(k => new ConditionPoint(from + k / 6, k % 6, Math.Pow(10, log(k) + 4), Math.Pow(10, log(k)), Math.Pow(10, log(k) - 8)))];

    private static SpectrumView Spectrum(double[] values, double relaxation) => new()
    {
        Values = [.. values.Select(v => new RitzValue(v, 0, Math.Abs(1 - relaxation * (1 - v)) < 1))],
        Directions = values.Length,
        LambdaMin = values.Min(),
        LambdaMax = values.Max(),
        RelaxationLimit = 2 / (1 - values.Min()),
        RelaxationBest = 2 / (2 - values.Min() - values.Max()),
        RelaxationInForce = relaxation,
    };

    private static CostView Cost(double spent, double? lost) => new()
    {
        Solvers = [new("water", 142), new("leaf", 5.4)],
        WaitingSeconds = 0,
        PassSeconds = 147.4,
        Passes = 192,
        NodeHoursSpent = spent,
        NodeHoursLost = lost,
        LostText = lost is null ? null : "40 passes of the step that gave up, and 61 above what the run needs with its columns kept",
        LastCheckpointStep = 16,
        LastSafeCheckpointStep = 48,
        JobsStillNeeded = 0,
    };

    private static IReadOnlyList<LogEntry> Log(DateTimeOffset now) =>
    [
        new(0, now.AddHours(-20), "open", "instance 244a28; level 3; adjustable: relaxation, filterRule, filterThreshold, historySteps", null),
        new(12, now.AddHours(-19), "learning", "rules that compare with history keep silent until step 4", 0),
        new(61, now.AddHours(-14), "remark", "inner solver restarted", 5),
        new(88, now.AddHours(-10), "checkpoint", "t = 0.045 s, written in 94 s", 8),
        new(104, now.AddHours(-8), "alert", "starved: the newest column was left out of each of the last five updates", 9),
        new(108, now.AddHours(-7.9), "closed", "slow: three steps without it", 10),
        new(150, now.AddHours(-2), "checkpoint", "t = 0.085 s, written in 95 s", 16),
    ];
}
