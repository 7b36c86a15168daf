using CouplingWatch.Monitoring.Journal;
using Microsoft.Data.Sqlite;

namespace CouplingWatch.Storage.Sqlite;

/// <summary>Reads beside the writer, each on a connection of its own. No read stays open between two pages, so the log of the writer can be folded back.</summary>
internal sealed class SqliteReads(string file)
{
    private const int PageEntries = 512;
    private const long PageBytes = 4 * 1024 * 1024;
    private const string Columns = "place, kind, record, received, body, digest";

    private readonly string connectionString =
        new SqliteConnectionStringBuilder { DataSource = file, Mode = SqliteOpenMode.ReadWrite, Pooling = true, DefaultTimeout = 5 }.ToString();

    /// <summary>The next entries after an order, some hundred at most; empty at the end.</summary>
    public List<JournalEntry> Page(string run, long afterOrder)
    {
        using var connection = Open();
        var page = new List<JournalEntry>();
        if (RunId(connection, run) is not { } id) return page;
        using var command = connection.CreateCommand();
        command.CommandText = $"SELECT {Columns} FROM entries WHERE place > $after AND place <= $last ORDER BY place LIMIT {PageEntries}";
        command.Parameters.AddWithValue("$after", JournalSchema.Place(id, 0) + afterOrder);
        command.Parameters.AddWithValue("$last", JournalSchema.Place(id, JournalSchema.MaxPlace));
        using var row = command.ExecuteReader();
        long bytes = 0;
        while (bytes < PageBytes && row.Read())
        {
            var entry = Entry(row);
            bytes += entry.Body.Length;
            page.Add(entry);
        }
        return page;
    }

    public JournalEntry? Find(string run, long seq)
    {
        using var connection = Open();
        if (seq < 0 || RunId(connection, run) is not { } id) return null;
        using var command = connection.CreateCommand();
        command.CommandText = $"SELECT {Columns} FROM entries WHERE record = $record ORDER BY place LIMIT 1";
        command.Parameters.AddWithValue("$record", JournalSchema.Place(id, seq));
        using var row = command.ExecuteReader();
        return row.Read() ? Entry(row) : null;
    }

    public List<JournaledRun> Runs()
    {
        using var connection = Open();
        using var command = connection.CreateCommand();
        command.CommandText = "SELECT name, instance, next_seq, next_order FROM runs WHERE next_order > 0 ORDER BY id";
        using var row = command.ExecuteReader();
        var runs = new List<JournaledRun>();
        while (row.Read()) runs.Add(new JournaledRun(row.GetString(0), row.IsDBNull(1) ? null : row.GetString(1), row.GetInt64(2), row.GetInt64(3)));
        return runs;
    }

    /// <summary>Lets go of the connections kept for reuse.</summary>
    public void Close()
    {
        using var connection = new SqliteConnection(connectionString);
        SqliteConnection.ClearPool(connection);
    }

    private SqliteConnection Open()
    {
        var connection = new SqliteConnection(connectionString);
        connection.Open();
        return connection;
    }

    private static long? RunId(SqliteConnection connection, string run)
    {
        using var command = connection.CreateCommand();
        command.CommandText = "SELECT id FROM runs WHERE name = $name";
        command.Parameters.AddWithValue("$name", run);
        return command.ExecuteScalar() as long?;
    }

    private static JournalEntry Entry(SqliteDataReader row) => new(
        row.GetInt64(0) & JournalSchema.MaxPlace,
        (JournalEntryKind)row.GetInt32(1),
        row.IsDBNull(2) ? -1 : row.GetInt64(2) & JournalSchema.MaxPlace,
        new DateTimeOffset(row.GetInt64(3), TimeSpan.Zero),
        (byte[])row.GetValue(4),
        (byte[])row.GetValue(5));
}
