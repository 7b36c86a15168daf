using System.Buffers.Text;
using System.Security.Cryptography;

namespace CouplingWatch.Server.Access;

/// <summary>The headers that keep a page to itself: nothing from elsewhere, no script in the page, no frame around it.</summary>
internal static class SiteSecurity
{
    private static readonly object NonceKey = new();

    /// <summary>The nonce under which this answer may carry a style sheet of the chart library.</summary>
    public static string StyleNonce(this HttpContext context) => (string)(context.Items[NonceKey] ??= Base64Url.EncodeToString(RandomNumberGenerator.GetBytes(16)));

    public static void UseSiteSecurity(this IApplicationBuilder app) => app.Use((context, next) =>
    {
        var headers = context.Response.Headers;
        headers.ContentSecurityPolicy = Policy(context.StyleNonce());
        headers.XContentTypeOptions = "nosniff";
        headers["Referrer-Policy"] = "no-referrer";
        headers["Permissions-Policy"] = "camera=(), microphone=(), geolocation=(), payment=(), usb=()";
        headers["Cross-Origin-Opener-Policy"] = "same-origin";
        headers["Cross-Origin-Resource-Policy"] = "same-origin";
        return next(context);
    });

    private static string Policy(string nonce) =>
        "default-src 'none'; script-src 'self'; style-src 'self' 'nonce-" + nonce + "'; img-src 'self' data:; font-src 'self'; connect-src 'self'; " +
        "manifest-src 'self'; base-uri 'self'; form-action 'self'; frame-ancestors 'none'; object-src 'none'";
}
