using System.Collections;

namespace CouplingWatch.Records;

/// <summary>Numbers by name, in the order they were sent. Immutable; at most a few names, so a lookup is a linear scan.</summary>
public sealed class NamedValues : IReadOnlyList<KeyValuePair<string, double>>
{
    private readonly string[] names;
    private readonly double[] values;

    /// <param name="names">Distinct names; kept, not copied.</param>
    /// <param name="values">Same length as <paramref name="names"/>; may hold NaN and infinities; kept, not copied.</param>
    public NamedValues(string[] names, double[] values)
    {
        ArgumentNullException.ThrowIfNull(names);
        ArgumentNullException.ThrowIfNull(values);
        if (names.Length != values.Length)
            throw new ArgumentException($"{names.Length} names for {values.Length} values; both must have the same length.", nameof(values));
        this.names = names;
        this.values = values;
    }

    public static NamedValues Of(params (string Name, double Value)[] pairs) =>
        new([.. pairs.Select(p => p.Name)], [.. pairs.Select(p => p.Value)]);

    public int Count => names.Length;

    public KeyValuePair<string, double> this[int index] => new(names[index], values[index]);

    public ReadOnlySpan<string> Names => names;

    public ReadOnlySpan<double> Values => values;

    /// <summary>The value of <paramref name="name"/>; false (and NaN) when it was not sent.</summary>
    public bool TryGet(string name, out double value)
    {
        for (var i = 0; i < names.Length; i++)
        {
            if (ReferenceEquals(names[i], name) || string.Equals(names[i], name, StringComparison.Ordinal))
            {
                value = values[i];
                return true;
            }
        }
        value = double.NaN;
        return false;
    }

    public IEnumerator<KeyValuePair<string, double>> GetEnumerator()
    {
        for (var i = 0; i < names.Length; i++) yield return this[i];
    }

    IEnumerator IEnumerable.GetEnumerator() => GetEnumerator();
}
