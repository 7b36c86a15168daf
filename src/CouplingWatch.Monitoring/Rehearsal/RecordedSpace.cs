using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;
using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>
/// The space of everything the recording says — secant columns, output differences, start errors — and all of it in the coordinates of an
/// orthonormal basis Q of that space. From here on no long vector is touched.
/// </summary>
internal sealed class RecordedSpace
{
    private const double DirectionCut = 1e-9;
    private const int MostColumns = 200;
    private const double LargestResidual = 30;

    private RecordedSpace(int dimension, IReadOnlyList<SpaceStep> steps, int windowFrom, IReadOnlyList<int> columnOwner, SmallMatrix inputs, SmallMatrix outputs, SmallMatrix[]? fieldGrams)
    {
        Dimension = dimension;
        Steps = steps;
        WindowFrom = windowFrom;
        ColumnOwner = columnOwner;
        Inputs = inputs;
        Outputs = outputs;
        FieldGrams = fieldGrams;
    }

    public int Dimension { get; }

    /// <summary>All recorded steps, oldest first; those from <see cref="WindowFrom"/> on are played.</summary>
    public IReadOnlyList<SpaceStep> Steps { get; }

    public int WindowFrom { get; }

    /// <summary>Index in <see cref="Steps"/> of the step each column of <see cref="Inputs"/> comes from.</summary>
    public IReadOnlyList<int> ColumnOwner { get; }

    /// <summary>d/‖d‖, one column a secant column.</summary>
    public SmallMatrix Inputs { get; }

    /// <summary>w/‖d‖.</summary>
    public SmallMatrix Outputs { get; }

    /// <summary>Q_fᵀQ_f by unknown field, for their norms; null with one field or a sketch.</summary>
    public SmallMatrix[]? FieldGrams { get; }

    /// <param name="steps">Recorded steps, oldest first, vectors already weighted.</param>
    /// <param name="window">How many of the last are played.</param>
    /// <param name="fieldLengths">Length of each field's stretch; null for one field or sketches.</param>
    public static RecordedSpace Of(IReadOnlyList<RecordedStep> steps, int window, int[]? fieldLengths, CancellationToken cancel)
    {
        var windowFrom = steps.Count - window;
        var (owners, differences, outputs) = Columns(steps);
        var spanning = new List<double[]>();
        foreach (var d in differences) spanning.Add(Unit(d));
        foreach (var w in outputs) spanning.Add(Unit(w));
        var starts = new double[steps.Count][][];
        for (var n = windowFrom; n < steps.Count; n++)
        {
            starts[n] = [.. Enumerable.Range(0, 3).Select(order => StartError(steps, n, order))];
            spanning.AddRange(starts[n].Select(Unit));
        }
        cancel.ThrowIfCancellationRequested();
        var space = ColumnSpace.Of(spanning, DirectionCut);
        cancel.ThrowIfCancellationRequested();
        var inputs = new SmallMatrix(space.Dimension, differences.Count);
        var images = new SmallMatrix(space.Dimension, differences.Count);
        for (var j = 0; j < differences.Count; j++)
        {
            var length = LongVector.Norm(differences[j]);
            Write(space.Coordinates(differences[j]), 1 / length, inputs.Column(j));
            Write(space.Coordinates(outputs[j]), 1 / length, images.Column(j));
        }
        var projected = new SpaceStep[steps.Count];
        for (var n = 0; n < steps.Count; n++)
        {
            var step = steps[n];
            projected[n] = new SpaceStep(
                step,
                [.. step.Passes.Select(p => new VectorPair(space.Coordinates(p.Residual), space.Coordinates(p.Output)))],
                starts[n] is { } errors ? [.. errors.Select(e => space.Coordinates(e))] : [],
                LongVector.Norm(step.Last.Output));
        }
        return new RecordedSpace(space.Dimension, projected, windowFrom, owners, inputs, images, fieldLengths is null ? null : Grams(space, fieldLengths));
    }

    /// <summary>Differences d of the inputs and w of the outputs of consecutive passes, where neither residual exceeds 30 ‖r₀‖; the newest 200.</summary>
    private static (List<int> Owners, List<double[]> Inputs, List<double[]> Outputs) Columns(IReadOnlyList<RecordedStep> steps)
    {
        List<int> owners = [];
        List<double[]> inputs = [], outputs = [];
        for (var n = steps.Count - 1; n >= 0 && inputs.Count < MostColumns; n--)
        {
            var passes = steps[n].Passes;
            var limit = LargestResidual * LongVector.Norm(passes[0].Residual);
            for (var k = passes.Count - 2; k >= 0 && inputs.Count < MostColumns; k--)
            {
                var (a, b) = (passes[k], passes[k + 1]);
                if (!(LongVector.Norm(a.Residual) < limit && LongVector.Norm(b.Residual) < limit)) continue;
                var w = Difference(b.Output, a.Output);
                var d = Difference(b.Residual, a.Residual);
                for (var i = 0; i < d.Length; i++) d[i] = w[i] - d[i];
                if (!(LongVector.Norm(d) > 0)) continue;
                owners.Add(n);
                inputs.Add(d);
                outputs.Add(w);
            }
        }
        owners.Reverse();
        inputs.Reverse();
        outputs.Reverse();
        return (owners, inputs, outputs);
    }

    /// <summary>Extrapolation of the recorded final outputs of earlier steps (order lowered where there are too few) minus the last input of step n.</summary>
    private static double[] StartError(IReadOnlyList<RecordedStep> steps, int n, int order)
    {
        var last = steps[n].Last;
        var a = steps[Math.Max(0, n - 1)].Last.Output;
        order = Math.Min(order, n - 1);
        var error = new double[a.Length];
        for (var i = 0; i < error.Length; i++)
        {
            var start = order switch
            {
                1 => 2 * a[i] - steps[n - 2].Last.Output[i],
                2 => 3 * a[i] - 3 * steps[n - 2].Last.Output[i] + steps[n - 3].Last.Output[i],
                _ => a[i],
            };
            error[i] = start - (last.Output[i] - last.Residual[i]);
        }
        return error;
    }

    private static SmallMatrix[] Grams(ColumnSpace space, int[] lengths)
    {
        var grams = new SmallMatrix[lengths.Length];
        var from = 0;
        for (var f = 0; f < lengths.Length; f++)
        {
            var gram = new SmallMatrix(space.Dimension, space.Dimension);
            for (var i = 0; i < space.Dimension; i++)
                for (var j = 0; j < space.Dimension; j++)
                    gram[i, j] = LongVector.Dot(space.Direction(i).Slice(from, lengths[f]), space.Direction(j).Slice(from, lengths[f]));
            grams[f] = gram;
            from += lengths[f];
        }
        return grams;
    }

    private static double[] Difference(double[] a, double[] b)
    {
        var result = new double[a.Length];
        for (var i = 0; i < a.Length; i++) result[i] = a[i] - b[i];
        return result;
    }

    private static double[] Unit(double[] vector)
    {
        var length = LongVector.Norm(vector);
        return length > 0 ? [.. vector.Select(v => v / length)] : vector;
    }

    private static void Write(double[] from, double factor, Span<double> to)
    {
        for (var i = 0; i < from.Length; i++) to[i] = factor * from[i];
    }
}

/// <summary>A recorded step in the coordinates of the space.</summary>
/// <param name="Passes">Qᵀr and Qᵀx̃ of every pass.</param>
/// <param name="StartErrors">Qᵀ(x₀ − x_last) for orders 0, 1, 2; empty outside the window.</param>
/// <param name="OutputNorm">‖x̃‖ of the last pass.</param>
internal sealed record SpaceStep(RecordedStep Recorded, IReadOnlyList<VectorPair> Passes, IReadOnlyList<double[]> StartErrors, double OutputNorm);
