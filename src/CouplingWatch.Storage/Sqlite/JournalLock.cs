namespace CouplingWatch.Storage.Sqlite;

/// <summary>Keeps a second server off the same journal: a lock file held open as long as the journal is. A crash lets go of it.</summary>
internal sealed class JournalLock : IDisposable
{
    private readonly FileStream file;

    private JournalLock(FileStream file) => this.file = file;

    /// <exception cref="JournalHeldException">Another program holds it.</exception>
    public static JournalLock Take(string journal)
    {
        try
        {
            return new JournalLock(new FileStream(journal + ".lock", FileMode.OpenOrCreate, FileAccess.ReadWrite, FileShare.None, 1));
        }
        catch (IOException thrown) when (SharingViolations.Contains(thrown.HResult))
        {
            throw new JournalHeldException(thrown);
        }
    }

    /// <summary>EAGAIN on Linux and on macOS, the sharing violation of Windows.</summary>
    private static readonly int[] SharingViolations = [11, 35, unchecked((int)0x80070020)];

    public void Dispose() => file.Dispose();
}

/// <summary>Another program has the journal open.</summary>
internal sealed class JournalHeldException(IOException inner) : IOException(inner.Message, inner);
