using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>The <c>iteration</c> record.</summary>
internal static class IterationParser
{
    public static StreamRecord? Read(ref RecordCursor c, StreamShape? shape)
    {
        if (!c.EnterObject()) return null;
        long? seq = null;
        DateTimeOffset? at = null;
        int? step = null, iteration = null, attempt = null;
        double? time = null, timeStep = null, passSeconds = null, relaxation = null;
        NamedValues? residuals = null, magnitudes = null, targets = null, met = null, seconds = null;
        IReadOnlyList<WorstResidual> worst = [];
        SurrogateReport? surrogate = null;
        IReadOnlyDictionary<string, GroupData>? groups = null;
        var data = NoData;
        while (c.NextMember())
        {
            bool good;
            if (c.Is("kind"u8, "kind")) good = c.SkipValue();
            else if (c.Is("seq"u8, "seq")) good = RecordParts.Seq(ref c, out seq);
            else if (c.Is("at"u8, "at")) good = c.MaybeTime(out at);
            else if (c.Is("step"u8, "step")) good = c.MaybeInt(out step);
            else if (c.Is("iteration"u8, "iteration")) good = c.MaybeInt(out iteration);
            else if (c.Is("residuals"u8, "residuals")) good = VectorValues.Named(ref c, out residuals, norms: true);
            else if (c.Is("time"u8, "time")) good = c.MaybeNumber(out time);
            else if (c.Is("timeStep"u8, "timeStep")) good = c.MaybeNumber(out timeStep);
            else if (c.Is("magnitudes"u8, "magnitudes")) good = VectorValues.Named(ref c, out magnitudes, norms: true);
            else if (c.Is("targets"u8, "targets")) good = VectorValues.Named(ref c, out targets, norms: true);
            else if (c.Is("met"u8, "met")) good = VectorValues.Flags(ref c, out met);
            else if (c.Is("seconds"u8, "seconds")) good = VectorValues.Named(ref c, out seconds);
            else if (c.Is("passSeconds"u8, "passSeconds")) good = c.MaybeNumber(out passSeconds);
            else if (c.Is("relaxation"u8, "relaxation")) good = c.MaybeNumber(out relaxation);
            else if (c.Is("attempt"u8, "attempt")) good = c.MaybeInt(out attempt);
            else if (c.Is("worst"u8, "worst")) good = Worst(ref c, out worst);
            else if (c.Is("surrogate"u8, "surrogate")) good = Surrogate(ref c, out surrogate);
            else if (c.Is("groups"u8, "groups")) good = GroupParser.Groups(ref c, shape, out groups);
            else good = GroupParser.Member(ref c, shape, null, ref data, out var taken) && (taken || c.SkipMember());
            if (!good) return null;
        }
        if (c.Problem is not null) return null;
        if (!RecordParts.SeqGiven(ref c, seq)) return null;
        if (step is null) return RecordParts.Missing(ref c, "step", "the time step, a whole number from 0");
        if (iteration is null) return RecordParts.Missing(ref c, "iteration", "the coupling iteration, a whole number from 0");
        if (residuals is null) return RecordParts.Missing(ref c, "residuals", "the residual norm of each field");
        if (residuals.Count == 0)
        {
            c.Fail(ProblemCodes.OutOfRange, "the residual norm of at least one field in residuals", "an empty object");
            return null;
        }
        return new IterationRecord
        {
            Seq = seq!.Value,
            At = at,
            Step = step.Value,
            Iteration = iteration.Value,
            Attempt = attempt,
            Time = time,
            TimeStep = timeStep,
            Residuals = residuals,
            Magnitudes = magnitudes,
            Targets = targets,
            Met = met,
            Seconds = seconds,
            PassSeconds = passSeconds,
            Relaxation = relaxation,
            Worst = worst,
            Vectors = data.Vectors,
            Sketch = data.Sketch,
            Basis = data.Basis,
            Surrogate = surrogate,
            Groups = groups,
        };
    }

    private static readonly GroupData NoData = new(null, null, null);

    private static bool Worst(ref RecordCursor c, out IReadOnlyList<WorstResidual> worst)
    {
        worst = [];
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject("an object of places by field")) return false;
        var list = new List<WorstResidual>();
        while (c.NextMember())
        {
            var field = c.MemberName();
            if (!c.EnterObject()) return false;
            int? index = null;
            double? value = null;
            double[]? at = null;
            while (c.NextMember())
            {
                var good = c.Is("index"u8, "index") ? c.MaybeInt(out index)
                    : c.Is("value"u8, "value") ? c.MaybeNumber(out value)
                    : c.Is("at"u8, "at") ? VectorValues.Numbers(ref c, out at)
                    : c.SkipMember();
                if (!good) return false;
            }
            if (c.Problem is not null) return false;
            if (index is not { } i) return c.FailMissing("index", "the index of the coordinate");
            if (value is not { } v) return c.FailMissing("value", "the residual there");
            list.Add(new WorstResidual(field, i, v, at));
        }
        worst = list;
        return c.Problem is null;
    }

    private static bool Surrogate(ref RecordCursor c, out SurrogateReport? report)
    {
        report = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        int? iterations = null;
        double? seconds = null, covered = null;
        while (c.NextMember())
        {
            var good = c.Is("iterations"u8, "iterations") ? c.MaybeInt(out iterations)
                : c.Is("seconds"u8, "seconds") ? c.MaybeNumber(out seconds)
                : c.Is("covered"u8, "covered") ? c.MaybeNumber(out covered)
                : c.SkipMember();
            if (!good) return false;
        }
        report = new SurrogateReport(iterations, seconds, covered);
        return c.Problem is null;
    }
}
