using Microsoft.Data.Sqlite;

namespace CouplingWatch.Storage.Sqlite;

/// <summary>
/// The tables of the journal. An entry's key is run · 2⁴⁰ + order, so that the entries of a run lie side by side and in order without a
/// second index; its <c>record</c> is run · 2⁴⁰ + seq, null for events.
/// </summary>
internal static class JournalSchema
{
    public const int Version = 1;
    public const int KeyBits = 40;
    public const long MaxPlace = (1L << KeyBits) - 1;

    private const string Tables = """
        CREATE TABLE IF NOT EXISTS runs (
          id INTEGER PRIMARY KEY,
          name TEXT NOT NULL UNIQUE,
          instance TEXT,
          next_seq INTEGER NOT NULL,
          next_order INTEGER NOT NULL);
        CREATE TABLE IF NOT EXISTS entries (
          place INTEGER PRIMARY KEY,
          kind INTEGER NOT NULL,
          record INTEGER,
          received INTEGER NOT NULL,
          body BLOB NOT NULL,
          digest BLOB NOT NULL);
        CREATE INDEX IF NOT EXISTS entries_by_record ON entries (record) WHERE record IS NOT NULL;
        CREATE TABLE IF NOT EXISTS write_check (id INTEGER PRIMARY KEY, at INTEGER NOT NULL);
        """;

    public static long Place(long run, long orderOrSeq) => (run << KeyBits) | orderOrSeq;

    /// <summary>Makes the connection durable and the tables stand.</summary>
    public static void Prepare(SqliteConnection connection)
    {
        Execute(connection, "PRAGMA journal_mode=WAL");
        Execute(connection, "PRAGMA synchronous=FULL");
        Execute(connection, "PRAGMA wal_autocheckpoint=4000");
        Execute(connection, "PRAGMA journal_size_limit=67108864");
        var version = Convert.ToInt64(Scalar(connection, "PRAGMA user_version"), System.Globalization.CultureInfo.InvariantCulture);
        if (version > Version) throw new NotSupportedException($"it was written by a newer version (format {version}, this one knows {Version})");
        if (version == Version) return;
        using var transaction = connection.BeginTransaction();
        Execute(connection, Tables);
        Execute(connection, $"PRAGMA user_version={Version}");
        transaction.Commit();
    }

    private static void Execute(SqliteConnection connection, string sql)
    {
        using var command = connection.CreateCommand();
        command.CommandText = sql;
        command.ExecuteNonQuery();
    }

    private static object? Scalar(SqliteConnection connection, string sql)
    {
        using var command = connection.CreateCommand();
        command.CommandText = sql;
        return command.ExecuteScalar();
    }
}
