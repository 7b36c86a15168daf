using System.Text.Json;
using System.Text.Json.Nodes;
using CouplingWatch.Records;

namespace CouplingWatch.Ndjson.Parsing;

/// <summary>Coupling settings and what may be changed of them.</summary>
internal static class SettingsParser
{
    public static bool Settings(ref RecordCursor c, out CouplingSettings? settings)
    {
        settings = null;
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        CouplingMethod? method = null;
        FilterRule? rule = null;
        double? relaxation = null, threshold = null, tolerance = null;
        int? history = null, cap = null, order = null;
        string? surrogate = null;
        JsonObject? own = null;
        while (c.NextMember())
        {
            var good = c.Is("method"u8, "method") ? c.MaybeWord(out method)
                : c.Is("relaxation"u8, "relaxation") ? c.MaybeNumber(out relaxation)
                : c.Is("historySteps"u8, "historySteps") ? c.MaybeInt(out history)
                : c.Is("filterRule"u8, "filterRule") ? c.MaybeWord(out rule)
                : c.Is("filterThreshold"u8, "filterThreshold") ? c.MaybeNumber(out threshold, 0)
                : c.Is("iterationCap"u8, "iterationCap") ? c.MaybeInt(out cap, 1)
                : c.Is("predictorOrder"u8, "predictorOrder") ? c.MaybeInt(out order)
                : c.Is("tolerance"u8, "tolerance") ? c.MaybeNumber(out tolerance, 0)
                : c.Is("surrogate"u8, "surrogate") ? c.MaybeText(out surrogate)
                : c.Is("own"u8, "own") ? c.Kept(out own)
                : c.SkipMember();
            if (!good) return false;
        }
        settings = new CouplingSettings
        {
            Method = method,
            Relaxation = relaxation,
            HistorySteps = history,
            FilterRule = rule,
            FilterThreshold = threshold,
            IterationCap = cap,
            PredictorOrder = order,
            Tolerance = tolerance,
            Surrogate = surrogate,
            Own = own,
        };
        return c.Problem is null;
    }

    public static bool Adjustable(ref RecordCursor c, out AdjustableSettings adjustable)
    {
        adjustable = new AdjustableSettings();
        if (c.Json.TokenType == JsonTokenType.Null) return true;
        if (!c.EnterObject()) return false;
        var ranges = new Dictionary<string, NumberRange>(StringComparer.Ordinal);
        var choices = new Dictionary<string, IReadOnlyList<string>>(StringComparer.Ordinal);
        IReadOnlyList<string> commands = [];
        while (c.NextMember())
        {
            var name = c.MemberName();
            if (!Entry(ref c, name, out var range, out var list)) return false;
            if (range is { } numbers) ranges[name] = numbers;
            else if (name == "commands") commands = list;
            else choices[name] = list;
        }
        adjustable = new AdjustableSettings { Ranges = ranges, Choices = choices, Commands = commands };
        return c.Problem is null;
    }

    private static bool Entry(ref RecordCursor c, string name, out NumberRange? range, out IReadOnlyList<string> list)
    {
        const string expected = "two numbers (a closed range) or a list of texts";
        range = null;
        var texts = new List<string>();
        list = texts;
        if (!c.EnterArray(expected)) return false;
        Span<double> ends = stackalloc double[2];
        var numbers = 0;
        for (var i = 0; c.NextElement(i); i++)
        {
            if (c.Json.TokenType == JsonTokenType.Number && texts.Count == 0)
            {
                if (numbers == 2 || name == "commands") return c.Fail(ProblemCodes.WrongLength, name == "commands" ? "a list of commands" : expected, "more numbers");
                if (!c.Number(out ends[numbers++])) return false;
            }
            else if (c.Json.TokenType == JsonTokenType.String && numbers == 0)
            {
                texts.Add(c.Json.GetString()!);
            }
            else
            {
                return c.Fail(ProblemCodes.WrongType, expected);
            }
        }
        if (c.Problem is not null) return false;
        if (numbers == 1) return c.Fail(ProblemCodes.WrongLength, expected, "one number");
        if (numbers == 2 && ends[0] > ends[1]) return c.Fail(ProblemCodes.OutOfRange, "a range whose lower end comes first", $"{ends[0]} and {ends[1]}");
        if (numbers == 2) range = new NumberRange(ends[0], ends[1]);
        return true;
    }
}
