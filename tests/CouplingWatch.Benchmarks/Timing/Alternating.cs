namespace CouplingWatch.Benchmarks.Timing;

/// <summary>Times several pieces of work in turn, so that a slow minute of the machine hits all of them.</summary>
internal static class Alternating
{
    /// <summary>Smallest and median seconds of each piece over the rounds; one round more is run first and forgotten.</summary>
    internal static Timing[] Measure(int rounds, params (Action Prepare, Action Work)[] pieces)
    {
        var seconds = new double[pieces.Length][];
        for (int p = 0; p < pieces.Length; p++) seconds[p] = new double[rounds];
        for (int round = -1; round < rounds; round++)
        {
            for (int p = 0; p < pieces.Length; p++)
            {
                pieces[p].Prepare();
                double start = ThreadClock.Seconds();
                pieces[p].Work();
                double taken = ThreadClock.Seconds() - start;
                if (round >= 0) seconds[p][round] = taken;
            }
        }
        return [.. seconds.Select(s => { Array.Sort(s); return new Timing(s[0], s[rounds / 2]); })];
    }
}

/// <summary>Seconds of one piece of work.</summary>
internal readonly record struct Timing(double Smallest, double Median);
