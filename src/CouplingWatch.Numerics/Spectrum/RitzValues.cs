using System.Numerics;
using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Secants;
using CouplingWatch.Numerics.Vectors;
using MathNet.Numerics;
using MathNet.Numerics.LinearAlgebra.Double;

namespace CouplingWatch.Numerics.Spectrum;

/// <summary>
/// Eigenvalues of the pass x ↦ x̃ as far as the secant pairs show them: with D = U·S·Zᵀ, the eigenvalues of UᵀWZS⁻¹, where w
/// is the change of the output for the change d of the input. Immutable.
/// Source of the projection: "Matrix algorithms, volume II: eigensystems", SIAM 2001, ch. 4 (Rayleigh–Ritz; from memory).
/// </summary>
public sealed class RitzValues
{
    /// <summary>Pairs looked at: the newest ones.</summary>
    public const int NewestPairs = 60;

    /// <summary>Directions with σ at or below this share of the largest are noise and left out.</summary>
    public const double DirectionCut = 1e-4;

    /// <summary>Directions needed before the extremes mean something.</summary>
    public const int DirectionsNeeded = 5;

    /// <summary>Largest imaginary part, as a share of the largest modulus, for which a relaxation is still named.</summary>
    public const double ImaginaryShareAllowed = 0.1;

    /// <summary>As for the decompositions: one thread.</summary>
    static RitzValues() => MathNet.Numerics.Control.UseSingleThread();

    private RitzValues(Complex[] values)
    {
        Values = values;
        Smallest = values.Length > 0 ? values.Min(v => v.Real) : double.NaN;
        Largest = values.Length > 0 ? values.Max(v => v.Real) : double.NaN;
        double modulus = values.Length > 0 ? values.Max(v => v.Magnitude) : 0;
        ImaginaryShare = modulus > 0 ? values.Max(v => Math.Abs(v.Imaginary)) / modulus : 0;
    }

    /// <summary>The eigenvalues, by rising real part (then rising imaginary part).</summary>
    public IReadOnlyList<Complex> Values { get; }

    /// <summary>Number of directions kept: as many as values.</summary>
    public int Kept => Values.Count;

    /// <summary>λ_min: smallest real part; NaN without values.</summary>
    public double Smallest { get; }

    /// <summary>λ_max: largest real part; NaN without values.</summary>
    public double Largest { get; }

    /// <summary>Largest imaginary part over largest modulus, 0 to 1.</summary>
    public double ImaginaryShare { get; }

    /// <summary>At least <see cref="DirectionsNeeded"/> directions were kept.</summary>
    public bool EnoughDirections => Kept >= DirectionsNeeded;

    /// <summary>2/(1 − λ_min) from the real parts alone, for showing; NaN without values or when λ_min ≥ 1.</summary>
    public double LimitOfRealParts => Smallest < 1 ? 2 / (1 - Smallest) : double.NaN;

    /// <summary>2/(2 − λ_min − λ_max) from the real parts alone, for showing; NaN without values or when λ_max ≥ 1.</summary>
    public double OptimumOfRealParts => Largest < 1 ? 2 / (2 - Smallest - Largest) : double.NaN;

    /// <summary>ω_max = 2/(1 − λ_min): fixed relaxation converges below it. Null when it must not be advised: too few directions, complex values or λ_min ≥ 1.</summary>
    public double? RelaxationLimit => Advisable && Smallest < 1 ? LimitOfRealParts : null;

    /// <summary>ω_opt = 2/(2 − λ_min − λ_max). Null when it must not be advised, as above, or when λ_max ≥ 1.</summary>
    public double? RelaxationOptimum => Advisable && Largest < 1 ? OptimumOfRealParts : null;

    private bool Advisable => EnoughDirections && ImaginaryShare <= ImaginaryShareAllowed;

    /// <summary>Ritz values of the newest pairs.</summary>
    /// <param name="d">Changes of the input, in order of arrival (oldest first), vectors of one length. Zero or not finite pairs do not count.</param>
    /// <param name="w">Changes of the output to the same pairs.</param>
    /// <returns>No values when there is no usable pair, or when the eigenvalue iteration does not converge (seen on contrived streams of wildly graded columns).</returns>
    /// <remarks>Cost about 8·length·60² at most.</remarks>
    /// <exception cref="ArgumentException">Counts or lengths differ.</exception>
    public static RitzValues Of(IReadOnlyList<double[]> d, IReadOnlyList<double[]> w)
    {
        ArgumentNullException.ThrowIfNull(d);
        ArgumentNullException.ThrowIfNull(w);
        if (d.Count != w.Count) throw new ArgumentException($"{d.Count} inputs but {w.Count} outputs", nameof(w));
        var (inputs, outputs) = Newest(d, w);
        if (inputs.Count == 0) return new RitzValues([]);

        var basis = new SecantBasis(inputs[0].Length, Math.Min(inputs.Count, inputs[0].Length));
        foreach (double[] column in inputs) basis.Append(column);
        TruncatedSvd svd = TruncatedSvd.Of(basis.Coefficients(), DirectionCut);

        var projected = new SmallMatrix(basis.Rank, outputs.Count);
        for (int j = 0; j < outputs.Count; j++) basis.Dots(outputs[j], projected.Column(j));
        SmallMatrix small = svd.Left.TransposeTimes(projected).Times(svd.Right);
        for (int k = 0; k < svd.Rank; k++)
            foreach (ref double entry in small.Column(k)) entry /= svd.Kept[k];

        return new RitzValues(EigenValues(small));
    }

    /// <summary>Eigenvalues by real, then imaginary part; none when an entry is not finite or the iteration for them does not converge.</summary>
    private static Complex[] EigenValues(SmallMatrix matrix)
    {
        double[] entries = matrix.ToColumnMajor();
        double largest = LongVector.LargestMagnitude(entries);
        if (!double.IsFinite(largest)) return [];
        if (largest == 0) return new Complex[matrix.Rows];
        for (int i = 0; i < entries.Length; i++) entries[i] /= largest;
        try
        {
            var eigen = new DenseMatrix(matrix.Rows, matrix.Columns, entries).Evd();
            return [.. eigen.EigenValues.Select(v => v * largest).OrderBy(v => v.Real).ThenBy(v => v.Imaginary)];
        }
        catch (NonConvergenceException)
        {
            return [];
        }
    }

    private static (List<double[]> Inputs, List<double[]> Outputs) Newest(IReadOnlyList<double[]> d, IReadOnlyList<double[]> w)
    {
        var inputs = new List<double[]>();
        var outputs = new List<double[]>();
        for (int j = Math.Max(0, d.Count - NewestPairs); j < d.Count; j++)
        {
            if (d[j].Length != w[j].Length || d[j].Length != d[0].Length)
                throw new ArgumentException($"pair {j} has {d[j].Length} and {w[j].Length} entries, pair 0 has {d[0].Length}", nameof(d));
            double norm = LongVector.Norm(d[j]);
            if (norm == 0 || !double.IsFinite(norm) || !double.IsFinite(LongVector.Norm(w[j]))) continue;
            inputs.Add(Scaled(d[j], 1 / norm));
            outputs.Add(Scaled(w[j], 1 / norm));
        }
        return (inputs, outputs);
    }

    private static double[] Scaled(double[] vector, double factor)
    {
        var result = new double[vector.Length];
        LongVector.AddScaled(result, factor, vector);
        return result;
    }
}
