using CouplingWatch.Monitoring.Journal;
using Microsoft.AspNetCore.Diagnostics;

namespace CouplingWatch.Server.Problems;

/// <summary>Turns what a call could not foresee into a problem; what nobody could foresee is logged and answered without its insides.</summary>
internal sealed class FaultAnswers(ILogger<FaultAnswers> log) : IExceptionHandler
{
    public async ValueTask<bool> TryHandleAsync(HttpContext context, Exception exception, CancellationToken cancellationToken)
    {
        if (exception is OperationCanceledException && context.RequestAborted.IsCancellationRequested)
        {
            context.Response.StatusCode = StatusCodes.Status499ClientClosedRequest;
            return true;
        }
        var answer = exception switch
        {
            BadHttpRequestException { StatusCode: 413 } => Problem.TooLarge.Because(exception.Message),
            BadHttpRequestException => Problem.BadQuery.Because(exception.Message),
            JournalUnavailableException { NoRoom: true } => Problem.NoRoom.Because(exception.Message),
            JournalUnavailableException => Problem.JournalDown.Because(exception.Message),
            ObjectDisposedException => Problem.NotReady.Because("The server is stopping."),
            _ => null,
        };
        if (answer is null)
        {
            log.LogError(exception, "{Method} {Path} failed", context.Request.Method, context.Request.Path);
            if (!context.Request.Path.StartsWithSegments("/api")) return false;
            answer = Problem.Internal.Because("The server met a fault of its own; it is in its log.");
        }
        await answer.ExecuteAsync(context);
        return true;
    }
}
