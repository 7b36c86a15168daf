namespace CouplingWatch.Server.Live;

/// <summary>How many outside clients watch a run, so that nothing is written out for nobody. Safe for concurrent use.</summary>
internal sealed class HubWatchers
{
    /// <summary>The board’s group; no run has such a name.</summary>
    public const string Board = ":board";
    private readonly Lock gate = new();
    private readonly Dictionary<string, HashSet<string>> runsOf = new(StringComparer.Ordinal);
    private readonly Dictionary<string, int> count = new(StringComparer.Ordinal);

    public bool Any(string watched)
    {
        lock (gate) return count.ContainsKey(watched);
    }

    /// <param name="watched">A run's name, or the board.</param>
    public void Add(string connection, string watched)
    {
        lock (gate)
        {
            if (!runsOf.TryGetValue(connection, out var set)) runsOf[connection] = set = new(StringComparer.Ordinal);
            if (set.Add(watched)) count[watched] = count.GetValueOrDefault(watched) + 1;
        }
    }

    public void Remove(string connection, string watched)
    {
        lock (gate)
        {
            if (runsOf.TryGetValue(connection, out var set) && set.Remove(watched)) Down(watched);
        }
    }

    public void RemoveAll(string connection)
    {
        lock (gate)
        {
            if (!runsOf.Remove(connection, out var set)) return;
            foreach (var watched in set) Down(watched);
        }
    }

    private void Down(string watched)
    {
        if (--count[watched] == 0) count.Remove(watched);
    }
}
