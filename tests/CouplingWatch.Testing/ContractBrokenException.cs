namespace CouplingWatch.Testing;

/// <summary>A promise of an interface was not kept.</summary>
public sealed class ContractBrokenException(string message) : Exception(message)
{
    public static void Unless(bool kept, string promise)
    {
        if (!kept) throw new ContractBrokenException(promise);
    }

    public static void Equal<T>(T expected, T actual, string what)
    {
        if (!EqualityComparer<T>.Default.Equals(expected, actual)) throw new ContractBrokenException($"{what}: expected {expected}, found {actual}");
    }
}
