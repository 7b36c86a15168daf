using System.Diagnostics;
using System.Runtime.InteropServices;

namespace CouplingWatch.Benchmarks.Timing;

/// <summary>
/// Processor time of the calling thread where the system tells it (Linux), wall time elsewhere: a busy neighbour then costs
/// cache and memory bandwidth, but not the time in which this thread did not run.
/// </summary>
internal static partial class ThreadClock
{
    private const int ThreadCpuTime = 3;
    private static readonly bool HasThreadTime = OperatingSystem.IsLinux();

    internal static string Kind => HasThreadTime ? "processor time of the thread" : "wall time";

    internal static double Seconds()
    {
        if (HasThreadTime && GetTime(ThreadCpuTime, out TimeSpec time) == 0) return time.Seconds + (time.Nanoseconds * 1e-9);
        return Stopwatch.GetTimestamp() / (double)Stopwatch.Frequency;
    }

    [LibraryImport("libc", EntryPoint = "clock_gettime")]
    private static partial int GetTime(int clock, out TimeSpec time);

    [StructLayout(LayoutKind.Sequential)]
    private struct TimeSpec
    {
        internal long Seconds;
        internal long Nanoseconds;
    }
}
