namespace CouplingWatch.Client;

/// <summary>How a <see cref="RunSender"/> sends. The defaults suit a solver on a cluster.</summary>
public sealed record RunSenderOptions
{
    public static readonly TimeSpan DefaultLinger = TimeSpan.FromMilliseconds(100);
    public const long DefaultBufferBytes = 64L * 1024 * 1024;
    public const int DefaultBatchBytes = 4 * 1024 * 1024;
    public const int DefaultBatchRecords = 1000;
    public static readonly TimeSpan LongestTimeout = TimeSpan.FromDays(24);

    /// <summary>Least time between two posts, so that records gather; 0 to 100 ms.</summary>
    public TimeSpan Linger { get; init; } = DefaultLinger;

    /// <summary>Most bytes of records kept while the server does not answer. Beyond it iterations are dropped and a <c>skipped</c> record says how many.</summary>
    public long BufferBytes { get; init; } = DefaultBufferBytes;

    /// <summary>Most bytes of one post; a longer record goes alone.</summary>
    public int BatchBytes { get; init; } = DefaultBatchBytes;

    public int BatchRecords { get; init; } = DefaultBatchRecords;

    /// <summary>First wait after a failed post; doubles up to <see cref="LongestBackOff"/>.</summary>
    public TimeSpan FirstBackOff { get; init; } = TimeSpan.FromMilliseconds(250);

    public TimeSpan LongestBackOff { get; init; } = TimeSpan.FromSeconds(30);

    /// <summary>Longest wait for one answer.</summary>
    public TimeSpan AnswerTimeout { get; init; } = TimeSpan.FromSeconds(30);

    /// <summary>Longest wait of <see cref="RunSender.CloseAsync"/> and of disposing until everything is delivered.</summary>
    public TimeSpan CloseTimeout { get; init; } = TimeSpan.FromSeconds(15);

    /// <summary>Where <c>NAME.ndjson</c> goes when no server is given, and <c>NAME.unsent.ndjson</c> with what could not be delivered at the end. Null: the current folder, and no file of what was not delivered.</summary>
    public string? Folder { get; init; }

    /// <summary>Carries the posts; null: an ordinary one of its own. Not disposed by the sender when given.</summary>
    public HttpMessageHandler? Handler { get; init; }

    public TimeProvider Time { get; init; } = TimeProvider.System;

    /// <summary>Hears, from the sending thread, a sentence about each fault and each recovery.</summary>
    public Action<string>? Log { get; init; }

    internal void Check()
    {
        if (Linger < TimeSpan.Zero || Linger > DefaultLinger) throw new ArgumentOutOfRangeException(nameof(Linger), Linger, "Linger must lie between 0 and 100 ms.");
        if (BufferBytes < 1024) throw new ArgumentOutOfRangeException(nameof(BufferBytes), BufferBytes, "BufferBytes must be at least 1,024.");
        if (BatchBytes < 1024) throw new ArgumentOutOfRangeException(nameof(BatchBytes), BatchBytes, "BatchBytes must be at least 1,024.");
        if (BatchRecords < 1) throw new ArgumentOutOfRangeException(nameof(BatchRecords), BatchRecords, "BatchRecords must be at least 1.");
        if (AnswerTimeout <= TimeSpan.Zero || AnswerTimeout > LongestTimeout) throw new ArgumentOutOfRangeException(nameof(AnswerTimeout), AnswerTimeout, "AnswerTimeout must lie above 0 and within 24 days.");
        if (CloseTimeout <= TimeSpan.Zero || CloseTimeout > LongestTimeout) throw new ArgumentOutOfRangeException(nameof(CloseTimeout), CloseTimeout, "CloseTimeout must lie above 0 and within 24 days.");
        if (LongestBackOff > LongestTimeout) throw new ArgumentOutOfRangeException(nameof(LongestBackOff), LongestBackOff, "LongestBackOff must lie within 24 days.");
        if (FirstBackOff <= TimeSpan.Zero || LongestBackOff < FirstBackOff) throw new ArgumentOutOfRangeException(nameof(FirstBackOff), FirstBackOff, "FirstBackOff must be above 0 and not above LongestBackOff.");
    }
}
