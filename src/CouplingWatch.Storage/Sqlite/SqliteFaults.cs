using CouplingWatch.Monitoring.Journal;
using Microsoft.Data.Sqlite;

namespace CouplingWatch.Storage.Sqlite;

/// <summary>Says in one sentence why the journal cannot be used.</summary>
internal static class SqliteFaults
{
    private const int Full = 13, Busy = 5, Locked = 6, ReadOnly = 8, CannotOpen = 14, IoError = 10, Corrupt = 11, NotADatabase = 26, Permission = 3;

    public static bool Explains(Exception thrown) => thrown is SqliteException or IOException or UnauthorizedAccessException or NotSupportedException;

    public static JournalUnavailableException Explain(string file, Exception thrown)
    {
        var folder = Path.GetDirectoryName(file);
        var sentence = thrown switch
        {
            SqliteException { SqliteErrorCode: Full } => $"There is no room left for the journal {file}.",
            SqliteException { SqliteErrorCode: Busy or Locked } or JournalHeldException => $"The journal {file} is held by another program.",
            SqliteException { SqliteErrorCode: ReadOnly or Permission } => $"The journal {file} may not be written.",
            SqliteException { SqliteErrorCode: CannotOpen } => $"The journal {file} cannot be opened; its folder must exist and be writable.",
            SqliteException { SqliteErrorCode: IoError } => $"The journal {file} cannot be written: the medium reports a fault or has no room left.",
            SqliteException { SqliteErrorCode: Corrupt or NotADatabase } => $"The file {file} is damaged or is no journal.",
            UnauthorizedAccessException => $"The folder {folder} may not be written.",
            NotSupportedException => $"The journal {file} cannot be used: {thrown.Message}.",
            _ => $"The journal {file} cannot be used: {FirstLine(thrown.Message)}",
        };
        return new JournalUnavailableException(sentence, thrown) { NoRoom = thrown is SqliteException { SqliteErrorCode: Full } };
    }

    private static string FirstLine(string text) => text.Split('\n', 2)[0].TrimEnd();
}
