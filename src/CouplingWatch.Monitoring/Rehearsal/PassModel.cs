using CouplingWatch.Numerics.Matrices;
using CouplingWatch.Numerics.Vectors;

namespace CouplingWatch.Monitoring.Rehearsal;

/// <summary>The pass of one step as a linear map about its fixed point: x̃ = x* + J (x − x*). Coordinates count from the last recorded input of the step.</summary>
/// <param name="MinusIdentity">J − I.</param>
/// <param name="FixedPoint">x* − x_last.</param>
internal sealed record PassModel(SmallMatrix MinusIdentity, double[] FixedPoint)
{
    private const double FitCut = 1e-6;
    private const double OwnCut = 1e-3;
    private const double FixedPointCut = 1e-10;

    /// <summary>Fits the pass of every window step twice: with its own columns on top of all, and strictly without them.</summary>
    /// <returns>For each window step, in order: own, strict.</returns>
    public static (PassModel Own, PassModel Strict)[] Fit(RecordedSpace space, CancellationToken cancel)
    {
        var all = Map(space, _ => true);
        var models = new (PassModel, PassModel)[space.Steps.Count - space.WindowFrom];
        for (var i = 0; i < models.Length; i++)
        {
            cancel.ThrowIfCancellationRequested();
            var n = space.WindowFrom + i;
            var last = space.Steps[n].Passes[^1].Residual;
            var strict = space.ColumnOwner.Contains(n) ? Map(space, owner => owner != n) : all;
            models[i] = (Of(Own(space, all, n), last), Of(strict, last));
        }
        return models;
    }

    /// <summary>B·A⁺ over the columns of the chosen steps; zero when there are none.</summary>
    private static SmallMatrix Map(RecordedSpace space, Predicate<int> chosen)
    {
        var columns = Enumerable.Range(0, space.ColumnOwner.Count).Where(j => chosen(space.ColumnOwner[j])).ToArray();
        if (columns.Length == 0) return new SmallMatrix(space.Dimension, space.Dimension);
        return TruncatedSvd.Of(Select(space.Inputs, columns), FitCut).MapTo(Select(space.Outputs, columns));
    }

    /// <summary>J + (B_n − J A_n) A_n⁺: the fit of all, corrected so that it reproduces the columns of step n.</summary>
    private static SmallMatrix Own(RecordedSpace space, SmallMatrix all, int n)
    {
        var columns = Enumerable.Range(0, space.ColumnOwner.Count).Where(j => space.ColumnOwner[j] == n).ToArray();
        if (columns.Length == 0) return all;
        var inputs = Select(space.Inputs, columns);
        var missing = Select(space.Outputs, columns);
        var foretold = all.Times(inputs);
        for (var j = 0; j < columns.Length; j++) LongVector.AddScaled(missing.Column(j), -1, foretold.Column(j));
        var correction = TruncatedSvd.Of(inputs, OwnCut).MapTo(missing);
        for (var j = 0; j < correction.Columns; j++) LongVector.AddScaled(correction.Column(j), 1, all.Column(j));
        return correction;
    }

    /// <summary>x* = x_last − e with (J − I) e = r_last.</summary>
    private static PassModel Of(SmallMatrix map, double[] lastResidual)
    {
        var minusIdentity = map.Copy();
        for (var i = 0; i < minusIdentity.Rows; i++) minusIdentity[i, i] -= 1;
        var error = TruncatedSvd.Of(minusIdentity, FixedPointCut).Solve(lastResidual);
        for (var i = 0; i < error.Length; i++) error[i] = -error[i];
        return new PassModel(minusIdentity, error);
    }

    private static SmallMatrix Select(SmallMatrix from, int[] columns)
    {
        var result = new SmallMatrix(from.Rows, columns.Length);
        for (var j = 0; j < columns.Length; j++) from.Column(columns[j]).CopyTo(result.Column(j));
        return result;
    }
}
