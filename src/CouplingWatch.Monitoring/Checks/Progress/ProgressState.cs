using CouplingWatch.Monitoring.State;

namespace CouplingWatch.Monitoring.Checks.Progress;

/// <summary>How the last eight iterations went; slow, noise-floor and stall divide it among themselves.</summary>
internal readonly record struct ProgressState(bool Judged, bool Crawls, bool Improves, bool Rises, bool FellFirst, bool Alternates, double Improvement, double FallingShare)
{
    /// <summary>Wanders without progress: noise-floor when the residual fell first and does not alternate, stall otherwise.</summary>
    public bool Wanders => Judged && !Improves && !Crawls && !Rises;

    public static ProgressState Of(StepState step, ProgressOptions options)
    {
        if (step.Last < StepState.ProgressWindow || step.Done || step.HasNotFinite) return default;
        var falling = step.FallingShare(StepState.ProgressWindow);
        var improvement = step.Improvement;
        return new ProgressState(
            Judged: true,
            Crawls: falling >= options.FallingShare,
            Improves: !(improvement < options.LeastImprovementDecades),
            Rises: step.Z[0] >= step.HighestZ - options.RisingBelowHighestDecades && falling < options.RisingFallingShare,
            FellFirst: step.FirstZ - step.LowestZ >= options.NoiseFloorDepthDecades,
            Alternates: step.Alternating,
            improvement, falling);
    }
}
