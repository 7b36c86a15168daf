namespace CouplingWatch.Coupling.Surrogates;

/// <summary>
/// A surrogate given by a linear model of the pass, dx̃ = A dx: with dr = (A − I) dx it answers dx̃ = dr + dx, dx = (A − I)⁻¹ dr,
/// solved by generalised conjugate residuals ("Variational iterative methods for nonsymmetric systems of linear equations",
/// SIAM J. Numer. Anal. 20 (1983) 345-357; from memory). What the iteration leaves undone is left to the fixed point.
/// </summary>
/// <param name="size">Length N.</param>
/// <param name="pass">Writes A dx; called again and again.</param>
/// <param name="tolerance">Relative residual at which the inner iteration stops, above 0 and below 1.</param>
/// <param name="most">Inner iterations at most.</param>
public sealed class LinearPassSurrogate(int size, LinearPass pass, double tolerance = 1e-3, int most = 40) : ISurrogate
{
    /// <inheritdoc/>
    public int Add(ReadOnlySpan<double> residualChange, Span<double> outputChange)
    {
        if (residualChange.Length != size || outputChange.Length != size)
            throw new ArgumentException($"{residualChange.Length} and {outputChange.Length} entries; {size} are needed.", nameof(residualChange));
        var left = residualChange.ToArray();
        var goal = tolerance * Math.Sqrt(Dot(left, left));
        var directions = new List<double[]>();
        var images = new List<double[]>();
        for (var n = 0; n < most && Math.Sqrt(Dot(left, left)) > goal; n++)
        {
            double[] p = [.. left], q = new double[size];
            pass(p, q);
            for (var i = 0; i < size; i++) q[i] -= p[i];
            Orthogonalise(p, q, directions, images);
            var length = Math.Sqrt(Dot(q, q));
            if (!(length > 0) || !double.IsFinite(length)) break;
            for (var i = 0; i < size; i++)
            {
                p[i] /= length;
                q[i] /= length;
            }
            var alpha = Dot(q, left);
            for (var i = 0; i < size; i++)
            {
                outputChange[i] += alpha * (p[i] + q[i]); // dx and its image (A − I) dx sum up to A dx
                left[i] -= alpha * q[i];
            }
            directions.Add(p);
            images.Add(q);
        }
        return directions.Count;
    }

    /// <summary>Twice, as one pass of classical Gram-Schmidt is not enough.</summary>
    private static void Orthogonalise(double[] p, double[] q, List<double[]> directions, List<double[]> images)
    {
        for (var pass = 0; pass < 2; pass++)
        {
            for (var j = 0; j < images.Count; j++)
            {
                var share = Dot(images[j], q);
                for (var i = 0; i < q.Length; i++)
                {
                    q[i] -= share * images[j][i];
                    p[i] -= share * directions[j][i];
                }
            }
        }
    }

    private static double Dot(double[] a, double[] b)
    {
        var sum = 0.0;
        for (var i = 0; i < a.Length; i++) sum += a[i] * b[i];
        return sum;
    }
}

/// <summary>A linear model of the pass: writes A dx to <paramref name="output"/>.</summary>
public delegate void LinearPass(ReadOnlySpan<double> dx, Span<double> output);
