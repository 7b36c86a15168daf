using System.Security.Cryptography;
using System.Text;
using CouplingWatch.Monitoring.Journal;

namespace CouplingWatch.Testing.Journals;

/// <summary>Journal entries for tests: an open record first, then remarks, every fourth entry an event.</summary>
public static class Entries
{
    private static readonly DateTimeOffset Start = new(2026, 12, 1, 8, 0, 0, TimeSpan.Zero);

    /// <summary>The entries from one order up to, not including, another.</summary>
    public static IReadOnlyList<JournalEntry> Range(int from, int to, int bodyBytes = 0) => [.. Enumerable.Range(from, to - from).Select(o => At(o, bodyBytes))];

    public static JournalEntry At(int order, int bodyBytes = 0)
    {
        var received = Start.AddTicks(12345L * order);
        if (order % 4 == 3) return new JournalEntry(order, JournalEntryKind.Event, -1, received, Encoding.UTF8.GetBytes($$"""{"event":"back","at":"2026-12-01T08:00:00Z","secondsSilent":{{order}}}"""), default);
        var seq = order - (order / 4);
        var text = seq == 0 ? """{"kind":"open","seq":0,"format":1,"instance":"6f1c","fields":[{"name":"a"}]}""" : $$"""{"kind":"remark","seq":{{seq}},"text":"{{new string('x', bodyBytes)}}é"}""";
        var body = Encoding.UTF8.GetBytes(text);
        return new JournalEntry(order, JournalEntryKind.Record, seq, received, body, SHA256.HashData(body));
    }

    /// <summary>Number of records among the first entries.</summary>
    public static int RecordsIn(int entries) => entries - (entries / 4);

    public static bool Same(JournalEntry a, JournalEntry b) =>
        a.Order == b.Order && a.Kind == b.Kind && a.Seq == b.Seq && a.Received == b.Received && a.Body.Span.SequenceEqual(b.Body.Span) && a.Digest.Span.SequenceEqual(b.Digest.Span);
}
