using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>Every record but <c>open</c> and <c>iteration</c>: few members, so one reader gathers them all and each kind takes its own.</summary>
internal static class SmallRecords
{
    private enum Basis { Cleared, Mapped }

    public static StreamRecord? Read(ref RecordCursor c, string kind)
    {
        if (!c.EnterObject()) return null;
        long? seq = null;
        DateTimeOffset? at = null;
        int? step = null, attempt = null, iterations = null, revision = null, fromStep = null, fromIteration = null;
        double? time = null, timeStep = null, seconds = null, insideSeconds = null;
        StepOutcome? stepOutcome = null;
        CloseOutcome? closeOutcome = null;
        Basis? basis = null;
        CouplingSettings? settings = null;
        IReadOnlyList<FieldDeclaration>? fields = null;
        string? refused = null, why = null, text = null, reason = null, inside = null;
        var reordered = false;
        while (c.NextMember())
        {
            var good = c.Is("kind"u8, "kind") ? c.SkipValue()
                : c.Is("seq"u8, "seq") ? RecordParts.Seq(ref c, out seq)
                : c.Is("at"u8, "at") ? c.MaybeTime(out at)
                : kind switch
                {
                    "step" => c.Is("step"u8, "step") ? c.MaybeInt(out step)
                        : c.Is("attempt"u8, "attempt") ? c.MaybeInt(out attempt)
                        : c.Is("iterations"u8, "iterations") ? c.MaybeInt(out iterations)
                        : c.Is("timeStep"u8, "timeStep") ? c.MaybeNumber(out timeStep)
                        : c.Is("outcome"u8, "outcome") ? c.MaybeWord(out stepOutcome)
                        : c.SkipMember(),
                    "applied" => c.Is("revision"u8, "revision") ? c.MaybeInt(out revision)
                        : c.Is("fromStep"u8, "fromStep") ? c.MaybeInt(out fromStep)
                        : c.Is("fromIteration"u8, "fromIteration") ? c.MaybeInt(out fromIteration)
                        : c.Is("settings"u8, "settings") ? SettingsParser.Settings(ref c, out settings)
                        : c.Is("refused"u8, "refused") ? c.MaybeText(out refused)
                        : c.SkipMember(),
                    "checkpoint" => c.Is("step"u8, "step") ? c.MaybeInt(out step)
                        : c.Is("time"u8, "time") ? c.MaybeNumber(out time)
                        : c.Is("seconds"u8, "seconds") ? c.MaybeNumber(out seconds)
                        : c.SkipMember(),
                    "resize" => c.Is("fields"u8, "fields") ? OpenParser.Fields(ref c, out fields)
                        : c.Is("basis"u8, "basis") ? c.MaybeWord(out basis)
                        : c.Is("reordered"u8, "reordered") ? c.Flag(out reordered)
                        : c.SkipMember(),
                    "skipped" => c.Is("iterations"u8, "iterations") ? c.MaybeInt(out iterations)
                        : c.Is("why"u8, "why") ? c.MaybeText(out why)
                        : c.SkipMember(),
                    "remark" => c.Is("text"u8, "text") ? c.MaybeText(out text) : c.SkipMember(),
                    "close" => c.Is("outcome"u8, "outcome") ? c.MaybeWord(out closeOutcome)
                        : c.Is("reason"u8, "reason") ? c.MaybeText(out reason)
                        : c.SkipMember(),
                    _ => c.Is("in"u8, "in") ? c.MaybeName(out inside)
                        : c.Is("insideSeconds"u8, "insideSeconds") ? c.MaybeNumber(out insideSeconds)
                        : c.SkipMember(),
                };
            if (!good) return null;
        }
        if (c.Problem is not null) return null;
        if (kind == "beat") return new BeatRecord { Seq = seq ?? -1, At = at, In = inside, InsideSeconds = insideSeconds };
        if (!RecordParts.SeqGiven(ref c, seq)) return null;
        var s = seq!.Value;
        switch (kind)
        {
            case "step":
                if (step is null) return RecordParts.Missing(ref c, "step", "the time step, a whole number from 0");
                if (stepOutcome is null) return RecordParts.Missing(ref c, "outcome", EnumWords<StepOutcome>.Expected);
                return new StepRecord { Seq = s, At = at, Step = step.Value, Attempt = attempt, Iterations = iterations, TimeStep = timeStep, Outcome = stepOutcome.Value };
            case "applied":
                if (revision is null) return RecordParts.Missing(ref c, "revision", "the revision taken over or refused");
                if (settings is null && refused is null) return RecordParts.Missing(ref c, "settings", "the complete settings in force, or refused with the reason");
                return new AppliedRecord { Seq = s, At = at, Revision = revision.Value, FromStep = fromStep, FromIteration = fromIteration, Settings = settings, Refused = refused };
            case "checkpoint":
                if (step is null) return RecordParts.Missing(ref c, "step", "the time step, a whole number from 0");
                return new CheckpointRecord { Seq = s, At = at, Step = step.Value, Time = time, Seconds = seconds };
            case "resize":
                if (fields is null) return RecordParts.Missing(ref c, "fields", "the fields with their new sizes");
                return new ResizeRecord { Seq = s, At = at, Fields = fields, BasisMapped = basis == Basis.Mapped, Reordered = reordered };
            case "skipped":
                return new SkippedRecord { Seq = s, At = at, Iterations = iterations, Why = why };
            case "remark":
                return new RemarkRecord { Seq = s, At = at, Text = text ?? "" };
            default:
                if (closeOutcome is null) return RecordParts.Missing(ref c, "outcome", EnumWords<CloseOutcome>.Expected);
                return new CloseRecord { Seq = s, At = at, Outcome = closeOutcome.Value, Reason = reason };
        }
    }

    /// <summary>A record of a kind this version does not know: only its place and time are read.</summary>
    public static StreamRecord? ReadUnknown(ref RecordCursor c, string kind)
    {
        if (!c.EnterObject()) return null;
        long? seq = null;
        DateTimeOffset? at = null;
        var must = false;
        while (c.NextMember())
        {
            var good = c.Is("seq"u8, "seq") ? RecordParts.Seq(ref c, out seq)
                : c.Is("at"u8, "at") ? c.MaybeTime(out at)
                : c.Is("must"u8, "must") ? c.Flag(out must)
                : c.SkipMember();
            if (!good) return null;
        }
        if (c.Problem is not null) return null;
        if (must)
        {
            c.Fail(ProblemCodes.MustUnderstand, "a kind this version knows, since the record says \"must\":true", $"\"{kind}\"");
            return null;
        }
        return RecordParts.SeqGiven(ref c, seq) ? new UnknownRecord(kind) { Seq = seq!.Value, At = at } : null;
    }
}
