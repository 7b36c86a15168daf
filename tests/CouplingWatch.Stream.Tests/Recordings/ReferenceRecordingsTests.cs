using System.Text.Json;
using CouplingWatch.Ndjson;
using CouplingWatch.Recordings;
using CouplingWatch.Records;
using CouplingWatch.Testing;
using CouplingWatch.Testing.Shapes;

namespace CouplingWatch.StreamTests.Recordings;

/// <summary>tests/reference/recordings, see its README.</summary>
public sealed class ReferenceRecordingsTests
{
    public static TheoryData<string> Names() => [.. ReferenceData.Recordings().Select(f => Path.GetFileName(f))];

    [Theory]
    [MemberData(nameof(Names))]
    public async Task Every_recording_reads_without_a_problem_and_writes_back_to_the_same_records(string name)
    {
        var records = new List<StreamRecord>();
        var again = new RecordReader();
        await foreach (var item in RecordingFile.ReadAsync(ReferenceData.Path("recordings", name), cancel: TestContext.Current.CancellationToken))
        {
            Assert.Null(item.Problem?.Sentence);
            if (item.Note is { } note) Assert.Equal((RecordingNoteKind.Resent, "c19-odd-but-valid.ndjson"), (note.Kind, name));
            if (item.Record is not { } record) continue;
            records.Add(record);
            Assert.Null(Structure.FirstDifference(record, again.Read(RecordWriter.Line(record)).Record));
        }
        using var labels = JsonDocument.Parse(await File.ReadAllBytesAsync(ReferenceData.Path("recordings", "labels.json"), TestContext.Current.CancellationToken));
        var label = labels.RootElement.EnumerateArray().Single(l => l.GetProperty("file").GetString() == name);
        Assert.Equal(label.GetProperty("iterations").GetInt32(), records.OfType<IterationRecord>().Count());
        var outcomes = label.GetProperty("outcomes").EnumerateObject().ToDictionary(o => o.Name, o => o.Value.GetInt32());
        // "cut" is the step in which the recording ends, which has no verdict.
        foreach (var (outcome, count) in outcomes.Where(o => o.Key != "cut"))
            Assert.Equal(count, records.OfType<StepRecord>().Count(s => s.Outcome.ToString().Equals(outcome, StringComparison.OrdinalIgnoreCase)));
    }

    [Fact]
    public void There_are_28_recordings() => Assert.Equal(28, ReferenceData.Recordings().Count);
}
