namespace CouplingWatch.Sketching;

/// <summary>
/// The sparse sign embedding of the stream format: coordinate i goes, with a sign and divided by √8, into one row of each of 8 blocks of
/// rows, both drawn by splitmix64 of seed + 8 i + j. Linear, and independent of how the coordinates are spread over ranks: every rank adds
/// those it owns and the sums add up. Immutable, safe for concurrent use.
/// Source of the construction: "Randomized numerical linear algebra: foundations and algorithms", Acta Numerica 29 (2020) 403–572,
/// DOI 10.1017/S0962492920000021 (sparse sign matrices, about 8 nonzeros a column).
/// </summary>
public sealed class SparseSignSketch
{
    /// <summary>Entries a coordinate, and blocks of rows.</summary>
    public const int Blocks = 8;

    /// <summary>Seeds are below 2⁵³, so that JSON carries them exactly.</summary>
    public const long SeedLimit = 1L << 53;

    private const double Scale = 0.35355339059327379; // 1/√8

    private readonly ulong blockRows;

    /// <param name="rows">A multiple of 8, at least 8.</param>
    /// <param name="seed">0 ≤ seed &lt; 2⁵³.</param>
    public SparseSignSketch(int rows, long seed)
    {
        if (rows < Blocks || rows % Blocks != 0) throw new ArgumentOutOfRangeException(nameof(rows), rows, $"The rows must be a positive multiple of {Blocks}.");
        if (seed is < 0 or >= SeedLimit) throw new ArgumentOutOfRangeException(nameof(seed), seed, "The seed must lie from 0 to 2⁵³ − 1.");
        Rows = rows;
        Seed = seed;
        blockRows = (ulong)(rows / Blocks);
    }

    public int Rows { get; }

    public long Seed { get; }

    /// <summary>Sketch of a whole vector. Cost: 8 hashes a coordinate.</summary>
    public double[] Apply(ReadOnlySpan<double> vector)
    {
        var sketch = new double[Rows];
        Add(vector, 0, sketch);
        return sketch;
    }

    /// <summary>Adds the coordinates of a part of the vector, whose first one has the global index <paramref name="first"/>.</summary>
    /// <param name="sketch">Length <see cref="Rows"/>. A NaN or infinite coordinate spoils the 8 rows it falls into.</param>
    public void Add(ReadOnlySpan<double> part, long first, Span<double> sketch)
    {
        if (first < 0) throw new ArgumentOutOfRangeException(nameof(first), first, "A global index is not negative.");
        if (sketch.Length != Rows) throw new ArgumentException($"The sketch has {sketch.Length} rows, not {Rows}.", nameof(sketch));
        var counter = (ulong)Seed + (Blocks * (ulong)first);
        foreach (var value in part)
        {
            var scaled = value * Scale;
            for (var j = 0; j < Blocks; j++)
            {
                var u = SplitMix64(counter++);
                var row = (int)(((ulong)j * blockRows) + ((u >> 1) % blockRows));
                sketch[row] += (u & 1) == 0 ? scaled : -scaled;
            }
        }
    }

    /// <summary>Sketches of residual and output of the same length at once: the hashes are drawn once.</summary>
    public (double[] Residual, double[] Output) ApplyBoth(ReadOnlySpan<double> residual, ReadOnlySpan<double> output)
    {
        if (residual.Length != output.Length) throw new ArgumentException($"The output has {output.Length} values, the residual {residual.Length}.", nameof(output));
        var r = new double[Rows];
        var x = new double[Rows];
        var counter = (ulong)Seed;
        for (var i = 0; i < residual.Length; i++)
        {
            var scaledR = residual[i] * Scale;
            var scaledX = output[i] * Scale;
            for (var j = 0; j < Blocks; j++)
            {
                var u = SplitMix64(counter++);
                var row = (int)(((ulong)j * blockRows) + ((u >> 1) % blockRows));
                if ((u & 1) == 0)
                {
                    r[row] += scaledR;
                    x[row] += scaledX;
                }
                else
                {
                    r[row] -= scaledR;
                    x[row] -= scaledX;
                }
            }
        }
        return (r, x);
    }

    /// <summary>splitmix64 as published; all arithmetic modulo 2⁶⁴.</summary>
    public static ulong SplitMix64(ulong x)
    {
        unchecked
        {
            x += 0x9E3779B97F4A7C15;
            x = (x ^ (x >> 30)) * 0xBF58476D1CE4E5B9;
            x = (x ^ (x >> 27)) * 0x94D049BB133111EB;
            return x ^ (x >> 31);
        }
    }
}
