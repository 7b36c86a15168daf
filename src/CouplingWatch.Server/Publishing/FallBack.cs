using System.Globalization;
using CouplingWatch.Wire;

namespace CouplingWatch.Server.Publishing;

/// <summary>The automatic way back of a revision: a step under it that does not converge brings the earlier settings back.</summary>
internal static class FallBack
{
    public const string By = "fall-back";

    /// <summary>The revision to publish now; null when nothing is to be taken back.</summary>
    /// <param name="failedSteps">Steps that gave up or failed since the last call.</param>
    /// <param name="fallBacks">From a revision to the one it goes back to.</param>
    /// <param name="newest">Newest revision published.</param>
    public static PublishedEvent? After(IReadOnlyList<int> failedSteps, IReadOnlyList<SettingsRevision> revisions, IReadOnlyDictionary<int, int> fallBacks, int newest, DateTimeOffset now)
    {
        if (!fallBacks.TryGetValue(newest, out var target)) return null;
        var current = revisions.FirstOrDefault(r => r.Revision == newest);
        var before = revisions.FirstOrDefault(r => r.Revision == target);
        if (current is not { State: RevisionState.Applied } || before is null) return null;
        var step = failedSteps.Where(s => s >= (current.FromStep ?? 0)).DefaultIfEmpty(-1).First();
        if (step < 0) return null;
        var reason = string.Create(CultureInfo.InvariantCulture, $"Step {step} did not converge under revision {newest}: back to revision {target}.");
        return new PublishedEvent(newest + 1, before.Settings, [], By, reason) { At = now };
    }
}
