using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Numerics.Secants;

/// <summary>Working memory of <see cref="Reduction"/>, kept between calls.</summary>
internal sealed class ReductionBuffers
{
    private double[] first = new double[16];
    private double[] second = new double[16];

    internal SweepSums Sums { get; } = new();

    internal Span<double> First(int count) => Room(ref first, count);

    internal Span<double> Second(int count) => Room(ref second, count);

    private static Span<double> Room(ref double[] buffer, int count)
    {
        if (buffer.Length < count) buffer = new double[Math.Max(count, 2 * buffer.Length)];
        return buffer.AsSpan(0, count);
    }
}
