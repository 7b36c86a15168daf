using System.Globalization;
using System.Text.Json.Nodes;
using CouplingWatch.Monitoring.Basis;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Monitoring.Wording;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Advising;

/// <summary>The moves that several checks propose, worked out from the state of the run. Null where a move makes no sense for it.</summary>
internal static class Moves
{
    public const int UsualHistory = 4;
    public const double UsualFirstRelaxation = 0.1;

    /// <summary>Fixed relaxation to the best of the directions seen when that lies below; else half.</summary>
    public static Move? RelaxationDown(RunState run)
    {
        if (run.RelaxationInForce is not { } now || run.Settings.Method is not (CouplingMethod.Fixed or CouplingMethod.Aitken or null)) return null;
        var limit = run.RelaxationLimit;
        var value = limit is not null && limit.Best < now ? limit.Best : now / 2;
        return Relaxation(run, "down", now, Rounded(value), limit);
    }

    /// <summary>Fixed relaxation to the best of the directions seen, up or down; null when that is not known or hardly differs.</summary>
    public static Move? RelaxationToBest(RunState run)
    {
        if (run.Settings.Method != CouplingMethod.Fixed || run.RelaxationInForce is not { } now || run.RelaxationLimit is not { FromDirections: true } limit) return null;
        var value = Rounded(limit.Best);
        if (value is not { } best || Math.Abs(best / now - 1) < 0.05) return null;
        return Relaxation(run, value > now ? "up" : "down", now, value, limit);
    }

    public static Move? ToQuasiNewton(RunState run)
    {
        if (run.UsesSecants || run.Settings.Method == CouplingMethod.Other) return null;
        var from = run.Settings.Method is { } method ? Say.Method(method) : null;
        return new Move
        {
            Setting = "method",
            To = "iqn-ils",
            From = from,
            Expected = new JsonObject { ["historySteps"] = run.Steady ? 0 : UsualHistory, ["filterRule"] = "own-norm", ["filterThreshold"] = AdvisedThreshold.Of(run, FilterRule.OwnNorm) },
            Text = $"use iqn-ils{(run.Steady ? "" : $" with {UsualHistory} reused steps")} instead of {from ?? "the present method"}",
            Caveat = "the first step of a run gains least",
        };
    }

    public static Move? HistoryUp(RunState run)
    {
        if (run.Steady || run.Settings.Method is not (CouplingMethod.IqnIls or CouplingMethod.IqnIlsm) || run.Settings.HistorySteps is not { } now || now >= UsualHistory) return null;
        return new Move
        {
            Setting = "historySteps",
            Direction = "up",
            From = Text(now),
            Value = UsualHistory,
            Text = $"reuse the columns of {UsualHistory} earlier steps instead of {now}",
            Caveat = "a strongly varying load makes old columns stale: watch the first step",
        };
    }

    public static Move? HistoryDown(RunState run)
    {
        if (run.Steady || run.Settings.HistorySteps is not { } now || now < 1) return null;
        var value = now / 2;
        return new Move { Setting = "historySteps", Direction = "down", From = Text(now), Value = value, Text = $"reuse the columns of {value} earlier steps instead of {now}", Caveat = "when the change was a single one, dropping the history once is enough" };
    }

    public static Move? DropHistory(RunState run)
    {
        if (run.Steady || run.HistorySteps < 1) return null;
        return new Move { Setting = "dropHistory", To = "once", Text = "drop the reused columns once", Caveat = "the next step starts without them and takes longer" };
    }

    /// <summary>The threshold to ε₀ of the rule in force, when that lies in the wanted direction.</summary>
    public static Move? Threshold(RunState run, bool up)
    {
        if (run.Settings.FilterRule is not (FilterRule.OwnNorm or FilterRule.PivotRatio) || run.Settings.FilterThreshold is not { } now) return null;
        var value = AdvisedThreshold.Of(run, run.Settings.FilterRule.Value);
        if (up ? value <= now : value >= now) return null;
        return new Move
        {
            Setting = "filterThreshold",
            Direction = up ? "up" : "down",
            From = Text(now),
            Value = value,
            Expected = Noise(run),
            Text = $"{(up ? "raise" : "lower")} the threshold {Say.Power(now)} → {Say.Power(value)} ({Say.Rule(run.Settings.FilterRule.Value)}; {(run.DeclaredNoise is { } n ? $"declared noise {Say.Power(n)}" : "noise not declared")})",
            Caveat = up ? "a threshold that is too large leaves out good columns" : "a threshold that is too small lets noise in",
        };
    }

    public static Move? ToOwnNorm(RunState run)
    {
        if (run.Settings.FilterRule is not (FilterRule.PivotRatio or FilterRule.None)) return null;
        var value = AdvisedThreshold.Of(run, FilterRule.OwnNorm);
        var from = Say.Rule(run.Settings.FilterRule.Value);
        return new Move
        {
            Setting = "filterRule",
            To = "own-norm",
            From = from,
            Value = value,
            Expected = Noise(run),
            Text = $"filter by own-norm with threshold {Say.Power(value)} instead of {from}",
            Caveat = "the threshold must change together with the rule",
        };
    }

    public static Move SolverNoiseDown(RunState run, double timesAbove)
    {
        var solver = run.NoisiestSolver is { Length: > 0 } name ? name : run.Open?.Solvers.Count == 1 ? run.Open.Solvers[0].Name : null;
        double? value = run.DeclaredNoise is { } noise ? RoundedDown(noise / Math.Max(10, 10 * timesAbove)) : null;
        return new Move
        {
            Setting = "solverNoise",
            Direction = "down",
            Solver = solver,
            From = Text(run.DeclaredNoise),
            Value = value,
            Text = $"tighten the inner tolerance of {solver ?? "the solver that iterates inside"}{(value is { } v ? $" to {Say.Power(v)} or less" : "")}",
            Caveat = "each pass costs a little more",
        };
    }

    public static Move ToleranceUp(RunState run, double timesAbove)
    {
        var declared = (run.Fields.Governing ?? (run.Fields.Unknowns.Count > 0 ? run.Fields.Unknowns[0] : null))?.Declared.Relative;
        double? value = declared is { } relative && timesAbove > 1 ? RoundedUp(2 * relative * timesAbove) : null;
        return new Move
        {
            Setting = "tolerance",
            Direction = "up",
            From = Text(declared),
            Value = value,
            AltersResult = true,
            Text = $"or loosen the coupling tolerance{(value is { } v ? $" to {Say.Power(v)}" : "")}",
            Caveat = "this alters the result: the floor is what the solvers can deliver",
        };
    }

    public static Move CapUp(RunState run, int to) => new()
    {
        Setting = "iterationCap",
        Direction = "up",
        From = Text(run.Settings.IterationCap),
        Value = to,
        AltersResult = true,
        Text = $"raise the iteration cap to {to}",
        Caveat = "this alters the result: steps that gave up would go on",
    };

    public static Move? TimeStepDown(RunState run)
    {
        if (run.Steady) return null;
        var now = run.Step.TimeStep ?? run.TimeStep;
        return new Move
        {
            Setting = "timeStep",
            Direction = "down",
            From = Text(now),
            Value = now / 2,
            AltersResult = true,
            Text = "halve the time step where it fails",
            Caveat = "more steps for the same time; this alters the result",
        };
    }

    private static Move Relaxation(RunState run, string direction, double now, double? value, Spectrum.RelaxationLimit? limit)
    {
        var expected = new JsonObject();
        if (limit is not null)
        {
            expected["relaxationLimit"] = limit.Largest;
            if (limit.Factor is { } factor) expected["factorPerIteration"] = factor;
        }
        var ground = limit is null ? "half of the present one" : $"{Say.Number(limit.Largest)} is the most {limit.Ground}";
        return new Move
        {
            Setting = "relaxation",
            Direction = direction,
            From = Text(now),
            Value = value,
            Expected = expected,
            Text = $"{(direction == "up" ? "raise" : "lower")} the relaxation {Say.Number(now)} → {Say.Number(value ?? now)} ({ground})",
            Caveat = "holds for the directions seen so far",
        };
    }

    private static JsonObject Noise(RunState run) => run.DeclaredNoise is { } noise ? new JsonObject { ["declaredNoise"] = noise } : [];

    /// <summary>Two significant digits, rounded towards 0.</summary>
    private static double? Rounded(double value)
    {
        if (!(value > 0) || !double.IsFinite(value)) return null;
        var unit = Math.Pow(10, Math.Floor(Math.Log10(value)) - 1);
        return Math.Round(Math.Floor(value / unit * (1 + 1e-12)) * unit, 15);
    }

    private static double RoundedDown(double value) => Math.Pow(10, Math.Floor(Math.Log10(value) + 1e-9));

    private static double RoundedUp(double value) => Math.Pow(10, Math.Ceiling(Math.Log10(value) - 1e-9));

    private static string? Text(double? value) => value?.ToString("R", CultureInfo.InvariantCulture);
}
