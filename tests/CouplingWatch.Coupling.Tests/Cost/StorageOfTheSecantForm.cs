using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;

namespace CouplingWatch.Coupling.Tests.Cost;

/// <summary>Common practice, no source: the secant form stores in proportion to N, an explicit Jacobian in proportion to N².</summary>
public class StorageOfTheSecantForm
{
    [Fact]
    public void The_secant_form_grows_with_the_length_of_the_interface_and_a_jacobian_with_its_square()
    {
        Assert.InRange((double)Secants(4000) / Secants(1000), 3.6, 4.4);
        Assert.InRange((double)Jacobian(1200) / Jacobian(300), 15.5, 16.5);
    }

    private static long Secants(int length)
    {
        var random = new Random(1);
        var columns = Enumerable.Range(0, 20).Select(_ => Enumerable.Range(0, length).Select(_ => random.NextDouble() - 0.5).ToArray()).ToList();
        var before = GC.GetAllocatedBytesForCurrentThread();
        var basis = new SecantBasis(length, columns.Count);
        foreach (var column in columns) basis.Append(column);
        return GC.GetAllocatedBytesForCurrentThread() - before;
    }

    private static long Jacobian(int length)
    {
        var before = GC.GetAllocatedBytesForCurrentThread();
        GC.KeepAlive(new SmallMatrix(length, length));
        return GC.GetAllocatedBytesForCurrentThread() - before;
    }
}
