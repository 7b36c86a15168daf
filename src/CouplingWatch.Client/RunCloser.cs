using System.Net;
using System.Net.Http.Json;
using CouplingWatch.Client.Buffering;
using CouplingWatch.Client.Delivery;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;
using CouplingWatch.Wire;

namespace CouplingWatch.Client;

/// <summary>Closes a run from outside its code: for the exit trap of a job script.</summary>
public static class RunCloser
{
    private const int Tries = 5;

    /// <returns>Null when the run is closed now; otherwise why it is not.</returns>
    public static async Task<string?> CloseAsync(Uri server, string run, CloseOutcome outcome, string? reason, RunSenderOptions? options = null, CancellationToken cancel = default)
    {
        ArgumentNullException.ThrowIfNull(server);
        RunName.Check(run);
        options ??= new RunSenderOptions();
        using var http = options.Handler is { } handler ? new HttpClient(handler, disposeHandler: false) : new HttpClient();
        http.Timeout = options.AnswerTimeout;
        RunDetail? detail;
        try
        {
            using var response = await http.GetAsync(new Uri(new Uri(server.AbsoluteUri.TrimEnd('/') + "/"), $"api/runs/{run}"), cancel).ConfigureAwait(false);
            if (response.StatusCode == HttpStatusCode.NotFound) return $"there is no run {run}";
            response.EnsureSuccessStatusCode();
            detail = await response.Content.ReadFromJsonAsync<RunDetail>(WireJson.Options, cancel).ConfigureAwait(false);
        }
        catch (Exception thrown) when (thrown is HttpRequestException or System.Text.Json.JsonException || (thrown is OperationCanceledException && !cancel.IsCancellationRequested))
        {
            return thrown.Message;
        }
        var next = detail!.Summary.NextSeq;
        await using var delivery = new HttpDelivery(server, run, null, options);
        DeliveryAnswer? answer = null;
        for (var i = 0; i < Tries; i++)
        {
            var close = new CloseRecord { Seq = next, At = options.Time.GetUtcNow(), Outcome = outcome, Reason = reason };
            answer = await delivery.DeliverAsync([new Pending(next, RecordWriter.Line(close))], null, cancel).ConfigureAwait(false);
            if (answer.Outcome == DeliveryOutcome.Accepted) return null;
            // The run's own last records may have come in between.
            if (answer.Outcome is not (DeliveryOutcome.Gap or DeliveryOutcome.Conflict) || answer.Next is not { } expected || expected == next) break;
            next = expected;
        }
        return answer?.Why ?? "refused";
    }
}
