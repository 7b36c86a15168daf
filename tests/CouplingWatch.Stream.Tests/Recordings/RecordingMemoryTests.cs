using CouplingWatch.Recordings;
using CouplingWatch.Testing.Streams;

namespace CouplingWatch.StreamTests.Recordings;

/// <summary>Measures the heap, so nothing else may run beside it.</summary>
[Collection(Alone.Name)]
public sealed class RecordingMemoryTests
{
    [Fact]
    public async Task A_recording_is_read_in_memory_that_does_not_grow_with_its_length()
    {
        var stream = SyntheticStream.Linear(0.1) with { Steps = 40_000, NoiseDecades = 0.1 };
        using var bytes = new RecordsAsBytes(stream.Records());
        long records = 0, early = 0;
        await foreach (var item in RecordingFile.ReadAsync(bytes, cancel: TestContext.Current.CancellationToken))
        {
            Assert.NotNull(item.Record);
            if (++records == 20_000) early = GC.GetTotalMemory(forceFullCollection: true);
        }
        var late = GC.GetTotalMemory(forceFullCollection: true);
        Assert.True(records > 200_000, $"{records} records");
        Assert.True(late - early < 2_000_000, $"{late - early} bytes more after {records} records than after 20,000");
    }
}

[CollectionDefinition(Name, DisableParallelization = true)]
public sealed class Alone
{
    public const string Name = "alone";
}
