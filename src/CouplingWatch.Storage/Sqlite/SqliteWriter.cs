using System.Runtime.InteropServices;
using CouplingWatch.Monitoring.Journal;
using Microsoft.Data.Sqlite;

namespace CouplingWatch.Storage.Sqlite;

/// <summary>The one connection that writes. Used by one thread only; each call to <see cref="Commit"/> is one transaction, durable when it returns.</summary>
internal sealed class SqliteWriter : IDisposable
{
    private readonly SqliteConnection connection;
    private readonly JournalLock held;
    private readonly Dictionary<string, RunState> runs = new(StringComparer.Ordinal);
    private long pageLimit = long.MaxValue;
    private readonly SqliteCommand addEntry, addRun, moveRun, check, findRun;

    public SqliteWriter(string file)
    {
        Directory.CreateDirectory(Path.GetDirectoryName(file)!);
        held = JournalLock.Take(file);
        connection = new SqliteConnection(new SqliteConnectionStringBuilder { DataSource = file, Mode = SqliteOpenMode.ReadWriteCreate, Pooling = false, DefaultTimeout = 5 }.ToString());
        try
        {
            connection.Open();
            JournalSchema.Prepare(connection);
            addEntry = Command("INSERT INTO entries (place, kind, record, received, body, digest) VALUES ($place, $kind, $record, $received, $body, $digest)", "$place", "$kind", "$record", "$received", "$body", "$digest");
            addRun = Command("INSERT INTO runs (name, next_seq, next_order) VALUES ($name, 0, 0) RETURNING id", "$name");
            moveRun = Command("UPDATE runs SET instance = $instance, next_seq = $seq, next_order = $order WHERE id = $id", "$instance", "$seq", "$order", "$id");
            check = Command("INSERT INTO write_check (id, at) VALUES (1, $at) ON CONFLICT (id) DO UPDATE SET at = excluded.at", "$at");
            findRun = Command("SELECT id, instance, next_seq, next_order FROM runs WHERE name = $name", "$name");
        }
        catch
        {
            connection.Dispose();
            held.Dispose();
            throw;
        }
    }

    /// <summary>Writes all requests in one transaction. Those whose entries do not follow on their run fail alone; when this throws, nothing was written.</summary>
    public IReadOnlyList<AppendRequest> Commit(IReadOnlyList<AppendRequest> requests, DateTimeOffset now)
    {
        var written = new List<AppendRequest>(requests.Count);
        var touched = new HashSet<RunState>();
        using var transaction = connection.BeginTransaction(deferred: false);
        try
        {
            foreach (var request in requests)
            {
                if (request.Run is null) RunCheck(now, transaction);
                else if (!Stage(request, touched, transaction)) continue;
                written.Add(request);
            }
            foreach (var run in touched) MoveRun(run, transaction);
            transaction.Commit();
        }
        catch
        {
            // What the database now holds is asked again, not guessed.
            runs.Clear();
            throw;
        }
        return written;
    }

    /// <summary>Bounds the size of the file; <see cref="long.MaxValue"/>: no bound.</summary>
    public void LimitPages(long pages)
    {
        if (pages == pageLimit) return;
        pageLimit = pages;
        using var command = connection.CreateCommand();
        command.CommandText = $"PRAGMA max_page_count={Math.Min(pages, 4294967294)}";
        command.ExecuteNonQuery();
    }

    private bool Stage(AppendRequest request, HashSet<RunState> touched, SqliteTransaction transaction)
    {
        var run = FindOrAdd(request.Run!, transaction);
        for (var i = 0; i < request.Entries.Count; i++)
        {
            if (request.Entries[i].Order == run.NextOrder + i) continue;
            request.Fail(new ArgumentException($"Entry {request.Entries[i].Order} of run {request.Run} came where {run.NextOrder + i} was expected."));
            return false;
        }
        addEntry.Transaction = transaction;
        foreach (var entry in request.Entries)
        {
            addEntry.Parameters[0].Value = JournalSchema.Place(run.Id, entry.Order);
            addEntry.Parameters[1].Value = (long)entry.Kind;
            addEntry.Parameters[2].Value = entry.Kind == JournalEntryKind.Record && entry.Seq >= 0 ? JournalSchema.Place(run.Id, entry.Seq) : DBNull.Value;
            addEntry.Parameters[3].Value = entry.Received.UtcTicks;
            addEntry.Parameters[4].Value = Bytes(entry.Body);
            addEntry.Parameters[5].Value = Bytes(entry.Digest);
            addEntry.ExecuteNonQuery();
            if (entry.Kind == JournalEntryKind.Record) run.NextSeq = Math.Max(run.NextSeq, entry.Seq + 1);
            run.Instance ??= OpenInstance.Of(entry);
        }
        run.NextOrder += request.Entries.Count;
        touched.Add(run);
        return true;
    }

    private RunState FindOrAdd(string name, SqliteTransaction transaction)
    {
        if (runs.TryGetValue(name, out var known)) return known;
        var state = Find(name, transaction);
        if (state is null)
        {
            addRun.Transaction = transaction;
            addRun.Parameters[0].Value = name;
            state = new RunState((long)addRun.ExecuteScalar()!);
        }
        return runs[name] = state;
    }

    private RunState? Find(string name, SqliteTransaction transaction)
    {
        findRun.Transaction = transaction;
        findRun.Parameters[0].Value = name;
        using var row = findRun.ExecuteReader();
        return row.Read() ? new RunState(row.GetInt64(0)) { Instance = row.IsDBNull(1) ? null : row.GetString(1), NextSeq = row.GetInt64(2), NextOrder = row.GetInt64(3) } : null;
    }

    private void MoveRun(RunState run, SqliteTransaction transaction)
    {
        moveRun.Transaction = transaction;
        moveRun.Parameters[0].Value = (object?)run.Instance ?? DBNull.Value;
        moveRun.Parameters[1].Value = run.NextSeq;
        moveRun.Parameters[2].Value = run.NextOrder;
        moveRun.Parameters[3].Value = run.Id;
        moveRun.ExecuteNonQuery();
    }

    private void RunCheck(DateTimeOffset now, SqliteTransaction transaction)
    {
        check.Transaction = transaction;
        check.Parameters[0].Value = now.UtcTicks;
        check.ExecuteNonQuery();
    }

    private SqliteCommand Command(string sql, params string[] parameters)
    {
        var command = connection.CreateCommand();
        command.CommandText = sql;
        foreach (var name in parameters) command.Parameters.Add(new SqliteParameter { ParameterName = name });
        command.Prepare();
        return command;
    }

    private static byte[] Bytes(ReadOnlyMemory<byte> memory) =>
        MemoryMarshal.TryGetArray(memory, out var segment) && segment.Offset == 0 && segment.Count == segment.Array!.Length ? segment.Array : memory.ToArray();

    public void Dispose()
    {
        foreach (var command in (SqliteCommand[])[addEntry, addRun, moveRun, check, findRun]) command.Dispose();
        connection.Dispose();
        held.Dispose();
    }

    private sealed class RunState(long id)
    {
        public long Id { get; } = id;

        public string? Instance { get; set; }

        public long NextSeq { get; set; }

        public long NextOrder { get; set; }
    }
}
