using CouplingWatch.Client.Buffering;
using CouplingWatch.Wire;

namespace CouplingWatch.Client.Delivery;

/// <summary>Where records go: a server or a file.</summary>
internal interface IDelivery : IAsyncDisposable
{
    /// <summary>Delivers records in order. A fault is an answer, not an exception; only cancellation throws.</summary>
    Task<DeliveryAnswer> DeliverAsync(IReadOnlyList<Pending> batch, byte[]? beat, CancellationToken cancel);

    /// <summary>The newest settings revision; null when it cannot be read or there is none.</summary>
    Task<SettingsRevision?> ReadSettingsAsync(CancellationToken cancel);
}

internal enum DeliveryOutcome
{
    /// <summary>Everything up to <see cref="DeliveryAnswer.Next"/> is durable.</summary>
    Accepted,

    /// <summary>One record is not as the format asks.</summary>
    Refused,

    /// <summary>The other side expects <see cref="DeliveryAnswer.Next"/>.</summary>
    Gap,

    /// <summary>The other side holds another record under this seq.</summary>
    Conflict,

    /// <summary>Too many bytes in one post.</summary>
    TooLarge,

    /// <summary>Try the same again later.</summary>
    Later,

    /// <summary>Never again: the run's name is taken or closed.</summary>
    Never,
}

/// <param name="Next">Seq expected next, when the answer said so.</param>
/// <param name="Seq">The record meant by the answer, when it said so.</param>
/// <param name="After">How long to wait, when the answer said so.</param>
/// <param name="Why">A sentence for the log.</param>
internal sealed record DeliveryAnswer(DeliveryOutcome Outcome, long? Next = null, int? Revision = null, long? Seq = null, TimeSpan? After = null, string? Why = null);
