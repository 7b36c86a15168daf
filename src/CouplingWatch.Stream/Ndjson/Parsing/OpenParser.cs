using System.Text.Json;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>The <c>open</c> record, and the declarations it shares with <c>resize</c>.</summary>
internal static class OpenParser
{
    public static StreamRecord? Read(ref RecordCursor c)
    {
        if (!c.EnterObject()) return null;
        long? seq = null;
        DateTimeOffset? at = null, allocation = null;
        int? format = null;
        string? instance = null, campaign = null, title = null;
        CouplingScheme? scheme = null;
        Stepping? stepping = null;
        IReadOnlyList<SolverDeclaration> solvers = [];
        IReadOnlyList<FieldDeclaration>? fields = null;
        CouplingSettings? settings = null;
        var adjustable = new AdjustableSettings();
        double? timeStep = null, endTime = null, nodes = null, beat = null;
        Continuation? continues = null;
        IReadOnlyDictionary<string, string> provenance = OpenRecord.EmptyStrings, labels = OpenRecord.EmptyStrings;
        while (c.NextMember())
        {
            var good = c.Is("kind"u8, "kind") ? c.SkipValue()
                : c.Is("seq"u8, "seq") ? RecordParts.Seq(ref c, out seq) && StartsAtZero(ref c, seq)
                : c.Is("at"u8, "at") ? c.MaybeTime(out at)
                : c.Is("format"u8, "format") ? Format(ref c, out format)
                : c.Is("instance"u8, "instance") ? c.MaybeText(out instance)
                : c.Is("campaign"u8, "campaign") ? c.MaybeText(out campaign)
                : c.Is("title"u8, "title") ? c.MaybeText(out title)
                : c.Is("scheme"u8, "scheme") ? c.MaybeWord(out scheme)
                : c.Is("stepping"u8, "stepping") ? c.MaybeWord(out stepping)
                : c.Is("solvers"u8, "solvers") ? Solvers(ref c, out solvers)
                : c.Is("fields"u8, "fields") ? Fields(ref c, out fields)
                : c.Is("settings"u8, "settings") ? SettingsParser.Settings(ref c, out settings)
                : c.Is("adjustable"u8, "adjustable") ? SettingsParser.Adjustable(ref c, out adjustable)
                : c.Is("timeStep"u8, "timeStep") ? c.MaybeNumber(out timeStep)
                : c.Is("endTime"u8, "endTime") ? c.MaybeNumber(out endTime)
                : c.Is("allocationEndsAt"u8, "allocationEndsAt") ? c.MaybeTime(out allocation)
                : c.Is("nodes"u8, "nodes") ? c.MaybeNumber(out nodes, 0)
                : c.Is("beatSeconds"u8, "beatSeconds") ? c.MaybeNumber(out beat, 0)
                : c.Is("continues"u8, "continues") ? Continues(ref c, out continues)
                : c.Is("provenance"u8, "provenance") ? RecordParts.Texts(ref c, out provenance)
                : c.Is("labels"u8, "labels") ? RecordParts.Texts(ref c, out labels)
                : c.SkipMember();
            if (!good) return null;
        }
        if (c.Problem is not null || !RecordParts.SeqGiven(ref c, seq)) return null;
        if (format is null) return RecordParts.Missing(ref c, "format", "1, the version of the stream format");
        if (fields is null) return RecordParts.Missing(ref c, "fields", "the fields exchanged at the interface, each with its name");
        return new OpenRecord
        {
            Seq = seq!.Value,
            At = at,
            Format = format.Value,
            Instance = instance,
            Campaign = campaign,
            Title = title,
            Scheme = scheme ?? CouplingScheme.Serial,
            Stepping = stepping ?? Stepping.Transient,
            Solvers = solvers,
            Fields = fields,
            Settings = settings ?? new CouplingSettings(),
            Adjustable = adjustable,
            TimeStep = timeStep,
            EndTime = endTime,
            AllocationEndsAt = allocation,
            Nodes = nodes,
            BeatSeconds = beat,
            Continues = continues,
            Provenance = provenance,
            Labels = labels,
        };
    }

    private static bool StartsAtZero(ref RecordCursor c, long? seq) => seq == 0 || c.Fail(ProblemCodes.OutOfRange, "0: open is the first record");

    private static bool Format(ref RecordCursor c, out int? format)
    {
        format = null;
        if (!c.Int(out var number)) return false;
        format = number;
        return number == 1 || c.Fail(ProblemCodes.UnsupportedFormat, "format 1");
    }

    private static bool Solvers(ref RecordCursor c, out IReadOnlyList<SolverDeclaration> solvers)
    {
        solvers = [];
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterArray("a list of solvers")) return false;
        var list = new List<SolverDeclaration>();
        while (c.NextElement(list.Count))
        {
            if (!c.EnterObject("a solver, an object with its name")) return false;
            string? name = null;
            double? noise = null, cost = null;
            while (c.NextMember())
            {
                var good = c.Is("name"u8, "name") ? c.MaybeName(out name)
                    : c.Is("noise"u8, "noise") ? c.MaybeNumber(out noise, 0)
                    : c.Is("cost"u8, "cost") ? c.MaybeNumber(out cost, 0)
                    : c.SkipMember();
                if (!good) return false;
            }
            if (c.Problem is not null) return false;
            if (name is null) return c.FailMissing("name", "the name of the solver");
            if (list.Any(s => s.Name == name)) return c.Fail(ProblemCodes.Duplicate, "every solver once", $"\"{name}\" twice");
            list.Add(new SolverDeclaration(name, noise, cost));
        }
        solvers = list;
        return c.Problem is null;
    }

    public static bool Fields(ref RecordCursor c, out IReadOnlyList<FieldDeclaration>? fields)
    {
        fields = null;
        if (!c.EnterArray("a list of fields")) return false;
        var list = new List<FieldDeclaration>();
        while (c.NextElement(list.Count))
        {
            if (!Field(ref c, out var field)) return false;
            if (list.Any(f => f.Name == field!.Name)) return c.Fail(ProblemCodes.Duplicate, "every field once", $"\"{field!.Name}\" twice");
            list.Add(field!);
        }
        if (c.Problem is not null) return false;
        if (list.Count == 0) return c.Fail(ProblemCodes.WrongLength, "at least one field", "an empty list");
        fields = list;
        return true;
    }

    private static bool Field(ref RecordCursor c, out FieldDeclaration? field)
    {
        field = null;
        if (!c.EnterObject("a field, an object with its name")) return false;
        string? name = null, unit = null, from = null, group = null;
        int? size = null;
        FieldRole? role = null;
        FieldNorm? norm = null;
        ToleranceReference? reference = null;
        double? weight = null, relative = null, absolute = null;
        while (c.NextMember())
        {
            var good = c.Is("name"u8, "name") ? c.MaybeName(out name)
                : c.Is("unit"u8, "unit") ? c.MaybeText(out unit)
                : c.Is("size"u8, "size") ? c.MaybeInt(out size, 1)
                : c.Is("role"u8, "role") ? c.MaybeWord(out role)
                : c.Is("from"u8, "from") ? c.MaybeName(out from)
                : c.Is("group"u8, "group") ? c.MaybeName(out group)
                : c.Is("weight"u8, "weight") ? c.MaybeNumber(out weight, 0)
                : c.Is("norm"u8, "norm") ? c.MaybeWord(out norm)
                : c.Is("relativeTo"u8, "relativeTo") ? c.MaybeWord(out reference)
                : c.Is("relative"u8, "relative") ? c.MaybeNumber(out relative, 0)
                : c.Is("absolute"u8, "absolute") ? c.MaybeNumber(out absolute, 0)
                : c.SkipMember();
            if (!good) return false;
        }
        if (c.Problem is not null) return false;
        if (name is null) return c.FailMissing("name", "the name of the field");
        field = new FieldDeclaration
        {
            Name = name,
            Unit = unit,
            Size = size,
            Role = role ?? FieldRole.Unknown,
            From = from,
            Group = group,
            Weight = weight,
            Norm = norm ?? FieldNorm.Euclidean,
            RelativeTo = reference ?? ToleranceReference.Output,
            Relative = relative,
            Absolute = absolute,
        };
        return true;
    }

    private static bool Continues(ref RecordCursor c, out Continuation? continues)
    {
        continues = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        string? run = null, basis = null;
        int? step = null;
        while (c.NextMember())
        {
            var good = c.Is("run"u8, "run") ? c.MaybeText(out run)
                : c.Is("step"u8, "step") ? c.MaybeInt(out step)
                : c.Is("basis"u8, "basis") ? c.MaybeText(out basis)
                : c.SkipMember();
            if (!good) return false;
        }
        if (c.Problem is not null) return false;
        if (run is null) return c.FailMissing("run", "the run that is continued");
        continues = new Continuation(run, step, basis);
        return true;
    }
}
