namespace CouplingWatch.Client;

/// <summary>Waits that double from a first to a longest one, each shortened by up to a quarter at random so that many senders do not come back at once.</summary>
internal sealed class BackOff
{
    private readonly Random random;
    private readonly TimeSpan first, longest;
    private TimeSpan next;

    public BackOff(TimeSpan first, TimeSpan longest, int seed)
    {
        (this.first, this.longest, next) = (first, longest, first);
        random = new Random(seed);
    }

    public TimeSpan Next()
    {
        var wait = next * (1 - (0.25 * random.NextDouble()));
        next = next * 2 < longest ? next * 2 : longest;
        return wait;
    }

    public void Reset() => next = first;
}
