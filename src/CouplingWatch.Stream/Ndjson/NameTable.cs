using System.Text;

namespace CouplingWatch.Ndjson;

/// <summary>
/// The field, solver and group names of one stream, each built once. Lookup is a linear scan: streams have a handful of names.
/// Beyond <see cref="Capacity"/> names it goes on correctly but shares no more. Not safe for concurrent use.
/// </summary>
public sealed class NameTable
{
    public const int Capacity = 256;
    private const int SetCapacity = 16;

    private readonly List<(byte[] Utf8, string Name)> names = [];
    private readonly List<string[]> sets = [];

    public int Count => names.Count;

    /// <summary>The name with these UTF-8 bytes. Invalid bytes become U+FFFD.</summary>
    public string Intern(ReadOnlySpan<byte> utf8)
    {
        foreach (var (known, name) in names)
        {
            if (utf8.SequenceEqual(known)) return name;
        }
        var made = Encoding.UTF8.GetString(utf8);
        if (names.Count < Capacity) names.Add((utf8.ToArray(), made));
        return made;
    }

    /// <summary>An array with these names; the same array for the same interned names, so records of one shape share it. Do not write to it.</summary>
    internal string[] InternSet(ReadOnlySpan<string> wanted)
    {
        foreach (var set in sets)
        {
            if (SameNames(set, wanted)) return set;
        }
        var made = wanted.ToArray();
        if (sets.Count < SetCapacity) sets.Add(made);
        return made;
    }

    private static bool SameNames(string[] set, ReadOnlySpan<string> wanted)
    {
        if (set.Length != wanted.Length) return false;
        for (var i = 0; i < set.Length; i++)
        {
            if (!ReferenceEquals(set[i], wanted[i])) return false;
        }
        return true;
    }
}
