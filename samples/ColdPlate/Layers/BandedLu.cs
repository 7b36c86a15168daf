namespace ColdPlate.Layers;

/// <summary>
/// Square band matrix with equal half bandwidths, factored in place without pivoting: meant for the diagonally dominant matrices of
/// implicit heat conduction, for which that is stable.
/// </summary>
internal sealed class BandedLu
{
    private readonly int band, width;
    private readonly double[] entries; // entry (i, j) at i·width + j − i + band

    public BandedLu(int size, int band)
    {
        Size = size;
        this.band = band;
        width = 2 * band + 1;
        entries = new double[size * width];
    }

    public int Size { get; }

    public void Clear() => Array.Clear(entries);

    /// <summary>Adds to an entry inside the band.</summary>
    public void Add(int row, int column, double value) => entries[row * width + column - row + band] += value;

    /// <summary>Replaces the matrix by its factors. Cost size·band².</summary>
    /// <exception cref="InvalidOperationException">A pivot is zero or not finite.</exception>
    public void Factor()
    {
        for (var k = 0; k < Size; k++)
        {
            var pivot = entries[k * width + band];
            if (pivot == 0 || !double.IsFinite(pivot)) throw new InvalidOperationException($"Pivot {pivot} in row {k}.");
            var last = Math.Min(Size - 1, k + band);
            var upper = entries.AsSpan(k * width + band + 1, last - k);
            for (var i = k + 1; i <= last; i++)
            {
                var at = i * width + k - i + band;
                if (entries[at] == 0) continue;
                var factor = entries[at] /= pivot;
                var row = entries.AsSpan(at + 1, last - k);
                for (var j = 0; j < row.Length; j++) row[j] -= factor * upper[j];
            }
        }
    }

    /// <summary>Solves with the factors, in place. Cost 4·size·band.</summary>
    public void Solve(double[] x)
    {
        for (var i = 0; i < Size; i++)
        {
            var sum = x[i];
            for (var j = Math.Max(0, i - band); j < i; j++) sum -= entries[i * width + j - i + band] * x[j];
            x[i] = sum;
        }
        for (var i = Size - 1; i >= 0; i--)
        {
            var sum = x[i];
            for (var j = Math.Min(Size - 1, i + band); j > i; j--) sum -= entries[i * width + j - i + band] * x[j];
            x[i] = sum / entries[i * width + band];
        }
    }
}
