namespace CouplingWatch.Client.Buffering;

/// <summary>A record that the server has not acknowledged yet.</summary>
/// <param name="Line">Its NDJSON line with the LF.</param>
internal readonly record struct Pending(long Seq, byte[] Line);
