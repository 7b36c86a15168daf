namespace CoupledRuns;

/// <summary>Keeps the coupling iterations at a steady pace at most; a slow iteration is not caught up.</summary>
/// <param name="clock">Whose time counts.</param>
/// <param name="rate">Iterations a second; 0 for no limit.</param>
internal sealed class Pacing(TimeProvider clock, double rate)
{
    private long last = clock.GetTimestamp();

    public async Task WaitAsync(CancellationToken stop)
    {
        if (rate > 0)
        {
            var left = TimeSpan.FromSeconds(1 / rate) - clock.GetElapsedTime(last);
            if (left > TimeSpan.Zero) await Task.Delay(left, clock, stop);
        }
        else
        {
            stop.ThrowIfCancellationRequested();
        }
        last = clock.GetTimestamp();
    }
}
