using System.Globalization;

namespace CouplingWatch.Monitoring.Checks;

/// <summary>Collects what is wrong with options, so that everything is said at once.</summary>
internal sealed class OptionFaults
{
    private readonly List<string> faults = [];

    public void Range(string option, double value, double low, double high)
    {
        if (value >= low && value <= high) return;
        faults.Add(string.Create(CultureInfo.InvariantCulture, $"{option} is {value}; it must lie in {low}…{high}"));
    }

    /// <summary>Throws when anything is wrong.</summary>
    /// <exception cref="ArgumentException">Names every option that is out of range, its value and the range.</exception>
    public void ThrowIfAny(string parameter)
    {
        if (faults.Count > 0) throw new ArgumentException(string.Join("; ", faults) + ".", parameter);
    }
}
