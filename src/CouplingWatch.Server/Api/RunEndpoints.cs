using System.Globalization;
using CouplingWatch.Server.Live;
using CouplingWatch.Server.Problems;
using CouplingWatch.Server.Runs;
using CouplingWatch.Wire;
using Microsoft.AspNetCore.Http.HttpResults;

namespace CouplingWatch.Server.Api;

/// <summary>Reading runs: the board, one run, its steps, iterations, basis and spectrum.</summary>
internal static class RunEndpoints
{
    private const int MostPoints = 2000;

    public static void MapRuns(this IEndpointRouteBuilder api)
    {
        api.MapGet("/runs", ListAsync).Named("ListRuns", "The board: every run with its verdict; filters campaign, state and label.KEY; pages by name.").Produces<Page<RunSummary>>();
        api.MapGet("/runs/{run}", DetailAsync).Named("GetRun", "One run: header, verdict, forecast, cost, the health of each check with its evidence.").Produces<RunDetail>().Faults(404);
        api.MapGet("/runs/{run}/steps", StepsAsync).Named("GetSteps", "Summaries a step, thinned to at most points without losing extremes.").Produces<Page<StripBar>>().Faults(400, 404);
        api.MapGet("/runs/{run}/iterations", IterationsAsync).Named("GetIterations", "The iterations of a step (the latest when none is named).").Produces<Page<IterationView>>().Faults(404);
        api.MapGet("/runs/{run}/basis", BasisAsync).Named("GetBasis", "The secant basis; with rule or threshold, what would be left out instead.").Produces<BasisView>().Faults(400, 404);
        api.MapGet("/runs/{run}/spectrum", SpectrumAsync).Named("GetSpectrum", "Ritz values of the pass on the directions seen.").Produces<SpectrumView>().Faults(404);
    }

    private static async Task<IResult> ListAsync(HttpRequest request, RunRegistry runs, string? campaign, string? state, string? after, int? limit, CancellationToken cancel)
    {
        if (Paging.Refuse(limit) is { } refusal) return refusal;
        var labels = request.Query.Where(q => q.Key.StartsWith("label.", StringComparison.Ordinal)).Select(q => (Key: q.Key[6..], Value: q.Value.ToString())).ToList();
        var summaries = await Task.WhenAll(runs.All.Select(h => h.SummaryAsync(cancel)));
        var chosen = summaries
            .Where(s => (campaign is null || s.Campaign == campaign) && (state is null || s.State == state))
            .Where(s => labels.TrueForAll(l => s.Labels.TryGetValue(l.Key, out var value) && value == l.Value));
        return TypedResults.Ok(Page<RunSummary>.Of(chosen, s => s.Run, after is null ? null : key => string.CompareOrdinal(key, after) > 0, limit ?? Paging.Default));
    }

    private static async Task<IResult> DetailAsync(string run, RunRegistry runs, CancellationToken cancel) =>
        runs.TryFind(run, out var host) ? TypedResults.Ok(await host.DetailAsync(cancel)) : Unknown(run);

    private static async Task<IResult> StepsAsync(string run, int? from, int? to, int? points, RunRegistry runs, CancellationToken cancel)
    {
        if (!runs.TryFind(run, out var host)) return Unknown(run);
        if (points is < 1 or > MostPoints) return Problem.BadQuery.Because($"points is 1 to {MostPoints}, not {points}.", ("member", "points"), ("expected", $"1 to {MostPoints}"));
        if (from < 0 || to < from) return Problem.BadQuery.Because("from and to are steps from 0, and to is not before from.", ("member", "from"), ("expected", "0 ≤ from ≤ to"));
        var bars = await host.AskAsync<IReadOnlyList<StripBar>>(m => [.. m.Steps(from, to, points ?? MostPoints)], [], cancel);
        return TypedResults.Ok(Page<StripBar>.Whole(bars));
    }

    private static async Task<IResult> IterationsAsync(string run, int? step, RunRegistry runs, CancellationToken cancel)
    {
        if (!runs.TryFind(run, out var host)) return Unknown(run);
        var wanted = step ?? (await host.SummaryAsync(cancel)).Step;
        var views = await host.AskAsync<IReadOnlyList<IterationView>>(m => [.. m.Iterations(wanted)], [], cancel);
        return views.Count > 0 || step is null
            ? TypedResults.Ok(Page<IterationView>.Whole(views))
            : Problem.NotKept.Because(string.Create(CultureInfo.InvariantCulture, $"The iterations of step {wanted} of run {run} are not kept, or it has not come yet."), ("member", "step"));
    }

    private static async Task<IResult> BasisAsync(string run, int? step, int? iteration, string? rule, double? threshold, RunRegistry runs, CancellationToken cancel)
    {
        if (!runs.TryFind(run, out var host)) return Unknown(run);
        if (!Query.TryFilterRule(rule, out var wanted)) return Problem.BadQuery.Because($"“{rule}” is no filter rule.", ("member", "rule"), ("expected", Query.FilterRules));
        if (threshold is not null and not (>= 0 and < 1)) return Problem.BadQuery.Because("threshold is at least 0 and below 1.", ("member", "threshold"), ("expected", "0 ≤ threshold < 1"));
        var basis = await host.AskAsync(m => m.Basis(step, iteration, wanted, threshold), null, cancel);
        return basis is not null
            ? TypedResults.Ok(basis)
            : Problem.NotKept.Because($"Run {run} has no secant basis there: it sends none, it has not come yet, or it is no longer kept.");
    }

    private static async Task<IResult> SpectrumAsync(string run, RunRegistry runs, CancellationToken cancel)
    {
        if (!runs.TryFind(run, out var host)) return Unknown(run);
        var spectrum = await host.AskAsync(m => m.Spectrum(), null, cancel);
        return spectrum is not null ? TypedResults.Ok(spectrum) : Problem.NotKept.Because($"Run {run} has no spectrum yet: it needs vectors or sketches (level 3) and a few iterations.");
    }

    internal static IResult Unknown(string run) => RunName.IsAllowed(run)
        ? Problem.UnknownRun.Because($"There is no run {run}.", ("member", "run"))
        : RunName.Refuse(run);
}
