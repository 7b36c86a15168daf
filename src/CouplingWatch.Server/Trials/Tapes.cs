using CouplingWatch.Monitoring.Journal;
using CouplingWatch.Monitoring.Rehearsal;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Server.Runs;

namespace CouplingWatch.Server.Trials;

/// <summary>Reads the latest steps of a run from the journal again, vectors and all; the live run keeps none of them in memory.</summary>
internal static class Tapes
{
    /// <summary>The tape, and what the checks said of its steps.</summary>
    public static async Task<(RehearsalTape Tape, RehearsalCircumstances Circumstances)> ReadTapeAsync(this RunHost host, IJournal journal, CancellationToken cancel)
    {
        var circumstances = await host.AskAsync(m => RehearsalCircumstances.From(m.Alerts), RehearsalCircumstances.None, cancel);
        var (from, inForce) = await host.RecentStepsAsync(cancel);
        var tape = new RehearsalTape();
        var after = -1L;
        if (from is { } seq && host.Open is { } open && await journal.FindAsync(host.Run, seq, cancel) is { } entry)
        {
            tape.Observe(open);
            foreach (var record in inForce) tape.Observe(record);
            after = entry.Order - 1;
        }
        var reader = new RecordReader();
        await foreach (var kept in journal.ReadAsync(host.Run, after, cancel))
        {
            if (kept.Kind == JournalEntryKind.Record && reader.Read(kept.Body.Span).Record is { } record) tape.Observe(record);
        }
        return (tape, circumstances);
    }
}
