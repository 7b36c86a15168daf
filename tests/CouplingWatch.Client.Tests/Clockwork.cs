using System.Diagnostics;
using Microsoft.Extensions.Time.Testing;

namespace CouplingWatch.Client.Tests;

/// <summary>Moves a fake clock on until something holds; gives up after a real deadline.</summary>
internal static class Clockwork
{
    private static readonly TimeSpan Deadline = TimeSpan.FromSeconds(30);

    public static async Task Until(this FakeTimeProvider time, Func<bool> holds, double stepSeconds = 0.05)
    {
        var since = Stopwatch.StartNew();
        while (!holds())
        {
            Assert.True(since.Elapsed < Deadline, "it did not come to hold");
            time.Advance(TimeSpan.FromSeconds(stepSeconds));
            await Task.Yield();
        }
    }

    public static async Task<T> Until<T>(this FakeTimeProvider time, Task<T> task)
    {
        await time.Until(() => task.IsCompleted);
        return await task;
    }
}
